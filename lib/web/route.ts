import "server-only";
import type { NextRequest } from "next/server";
import type { z } from "zod";
import type { Actor } from "@/lib/kernel/actor";
import { env } from "@/lib/kernel/env";
import { Forbidden, Invalid } from "@/lib/kernel/errors";
import { withRequestId } from "@/lib/kernel/log";
import { failureOf } from "./failure";
import { statusOf } from "./status-of";
import { viewer } from "./viewer";

export interface RouteContext<P, Q> {
  actor: Actor;
  params: P;
  search: Q;
  body: unknown;
  request: NextRequest;
}

export interface RouteSpec<P extends z.ZodType, Q extends z.ZodType> {
  params?: P;
  search?: Q;
  /** Anything but a Response is answered as JSON. */
  handle: (context: RouteContext<z.output<P>, z.output<Q>>) => Promise<unknown>;
}

const MUTATING = new Set(["POST", "PUT", "PATCH", "DELETE"]);

/** The one wrapper for our own route handlers: Origin, parsing, who is asking, errors as JSON with their status. */
export function route<P extends z.ZodType, Q extends z.ZodType>(spec: RouteSpec<P, Q>) {
  return async (
    request: NextRequest,
    context: { params: Promise<Record<string, string | string[]>> },
  ): Promise<Response> => {
    const requestId = request.headers.get("x-request-id") ?? "route";
    return withRequestId(requestId, async () => {
      try {
        checkOrigin(request);
        const params = parse(spec.params, await context.params);
        const search = parse(spec.search, Object.fromEntries(request.nextUrl.searchParams));
        const isJson = request.headers.get("content-type")?.startsWith("application/json");
        const body = MUTATING.has(request.method) && isJson ? await request.json().catch(() => null) : null;
        const { actor } = await viewer();
        const answer = await spec.handle({ actor, params, search, body, request });
        return answer instanceof Response
          ? answer
          : Response.json(answer, { headers: { "cache-control": "no-store" } });
      } catch (error) {
        const { ok: _ok, ...failure } = failureOf(error, `${request.method} ${request.nextUrl.pathname}`);
        const status = failure.code === "unexpected" ? 500 : statusOf[failure.code];
        return Response.json({ error: failure }, { status, headers: { "cache-control": "no-store" } });
      }
    });
  };
}

function checkOrigin(request: NextRequest): void {
  if (!MUTATING.has(request.method)) return;
  const origin = request.headers.get("origin");
  if (origin !== new URL(env.SITE_URL).origin)
    throw new Forbidden("This request did not come from a page of this site.");
}

function parse<S extends z.ZodType>(schema: S | undefined, raw: unknown): z.output<S> {
  if (!schema) return undefined as z.output<S>;
  const parsed = schema.safeParse(raw);
  if (parsed.success) return parsed.data;
  throw new Invalid(
    parsed.error.issues.map((issue) => `${issue.path.join(".")}: ${issue.message}`).join("; "),
  );
}
