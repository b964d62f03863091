import "server-only";
import { revalidatePath } from "next/cache";
import { cookies, headers } from "next/headers";
import { redirect } from "next/navigation";
import type { z } from "zod";
import { env } from "@/lib/kernel/env";
import { withRequestId } from "@/lib/kernel/log";
import type { Verb } from "@/lib/kernel/verb";
import { type Failure, failureOf } from "./failure";
import { viewer } from "./viewer";

export type ActionResult<R> = { ok: true; data: R } | Failure;

export interface ActionOptions<I, R> {
  /** Paths whose server components must be read again. */
  refresh?: (context: { input: I; data: R }) => string[];
  redirectTo?: (context: { input: I; data: R }) => string;
  /** What the verb must know of the request and the form must not say, such as its address. */
  adds?: () => Promise<Partial<I>>;
  /** Kept in this browser only, out of reach of scripts: the role in use. */
  cookie?: (context: { input: I; data: R }) => { name: string; value: string; maxAgeS: number };
}

/**
 * A command as a server action. Next checks the Origin; the verb checks everything else and parses the input again.
 * `operationId`, made by the form when it is opened, turns a second click into the first one's result.
 */
export function action<I extends z.ZodType, R>(verb: Verb<I, R>, options: ActionOptions<z.input<I>, R> = {}) {
  return async (input: z.input<I>, operationId?: string): Promise<ActionResult<R>> => {
    const requestId = (await headers()).get("x-request-id") ?? "action";
    let data: R;
    try {
      const { actor } = await viewer();
      const operation =
        operationId && "personId" in actor
          ? { operationId: `${actor.personId}:${operationId}`.slice(0, 120) }
          : {};
      const added = options.adds ? { ...(input as object), ...(await options.adds()) } : input;
      data = await withRequestId(requestId, () => verb(actor, added as z.input<I>, operation));
    } catch (error) {
      return failureOf(error, verb.verbName);
    }
    const kept = options.cookie?.({ input, data });
    if (kept) {
      (await cookies()).set(kept.name, kept.value, {
        httpOnly: true,
        sameSite: "lax",
        path: "/",
        secure: env.SITE_URL.startsWith("https:"),
        maxAge: kept.maxAgeS,
      });
    }
    for (const path of options.refresh?.({ input, data }) ?? []) revalidatePath(path);
    if (options.redirectTo) redirect(options.redirectTo({ input, data }));
    return { ok: true, data };
  };
}
