import { createRouteHandler, createUploadthing, type FileRouter, UTFiles } from "uploadthing/next";
import { UploadThingError } from "uploadthing/server";
import { z } from "zod";
import { env } from "@/lib/kernel/env";
import { Expected } from "@/lib/kernel/errors";
import { log } from "@/lib/kernel/log";
import { UPLOAD_WINDOW_H, type UploadSlug, uploadLimits } from "./states";
import { logLevelOf, type UploadsConfig } from "./uploadthing";

export interface AnnouncedFile {
  name: string;
  sizeBytes: number;
  type: string;
}

export interface ArrivedFile {
  key: string;
  name: string;
  sizeBytes: number;
  /** The client's claim. */
  type: string;
  /** What `admit` gave as this file's own id. */
  customId: string | null;
}

/** What the caller decides about one kind of upload. */
export interface UploadGate {
  /**
   * Who is this, and may they? Throws an Expected error to refuse. What it returns comes back, signed, with the file;
   * `fileIds`, one for each announced file, come back as `customId`.
   */
  admit(request: { headers: Headers; subjectId: string; files: readonly AnnouncedFile[] }): Promise<{
    context: Record<string, string>;
    fileIds?: readonly string[];
  }>;
  /**
   * A file is stored. May be called more than once for one file: key on `file.key`. It writes a row and enqueues, and
   * no more, since the browser waits; where it throws, the store is asked to say so again. What it returns reaches the
   * browser.
   */
  arrived(file: ArrivedFile, context: Record<string, string>): Promise<Record<string, string>>;
}

export type UploadGates = Record<UploadSlug, UploadGate>;

/** What the upload is for: the id of a delivery, a case or a notice. */
const UploadInput = z.object({ subjectId: z.string().min(1).max(64) });
const Context = z.record(z.string(), z.string());

/** A refusal with a reason that is safe to show; anything else becomes the SDK's plain "failed". */
function asUploadError(error: unknown): unknown {
  if (!(error instanceof Expected)) return error;
  const code =
    error.code === "not_found"
      ? "NOT_FOUND"
      : error.code === "unauthenticated" || error.code === "forbidden"
        ? "FORBIDDEN"
        : "BAD_REQUEST";
  return new UploadThingError({ code, message: error.message });
}

/** The SDK answers 200 whatever a gate threw; the message of arrival that failed is kept here until it is answered. */
const failedArrivals = new WeakMap<Request, unknown>();

function makeRoute(slug: UploadSlug, gate: UploadGate) {
  const { maxFileSize, maxFileCount, accept } = uploadLimits[slug];
  const limit = { maxFileSize, maxFileCount, acl: "private", contentDisposition: "attachment" } as const;
  // Browsers give FLAC, AIFF and Broadcast WAV many names or none, so the bytes decide after arrival.
  const kinds =
    accept === "audio"
      ? { audio: limit, blob: limit }
      : { pdf: limit, image: limit, text: limit, blob: limit };
  const f = createUploadthing({ errorFormatter: (error) => ({ message: error.message }) });
  return f(kinds, { awaitServerData: true, presignedURLTTL: `${UPLOAD_WINDOW_H} hours` })
    .input(UploadInput)
    .middleware(async ({ req, files, input }) => {
      try {
        const announced = files.map((file) => ({ name: file.name, sizeBytes: file.size, type: file.type }));
        const { context, fileIds } = await gate.admit({
          headers: req.headers,
          subjectId: input.subjectId,
          files: announced,
        });
        const named = files.map((file, index) => ({ ...file, customId: fileIds?.[index] ?? null }));
        return { context, [UTFiles]: named };
      } catch (error) {
        throw asUploadError(error);
      }
    })
    .onUploadComplete(async ({ req, file, metadata }) => {
      try {
        const arrived = {
          key: file.key,
          name: file.name,
          sizeBytes: file.size,
          type: file.type,
          customId: file.customId,
        };
        return await gate.arrived(arrived, Context.parse(metadata.context));
      } catch (error) {
        failedArrivals.set(req, error);
        throw error;
      }
    });
}

export function makeUploadRouter(gates: UploadGates) {
  return {
    master: makeRoute("master", gates.master),
    paper: makeRoute("paper", gates.paper),
    confidential: makeRoute("confidential", gates.confidential),
  } satisfies FileRouter;
}

/** For `import type` in the browser's half. */
export type UploadRouter = ReturnType<typeof makeUploadRouter>;

/**
 * The GET and POST of the upload address. The SDK checks the store's signature on messages of arrival itself; one that
 * the gate could not take is answered 503, so that the store sends it again.
 */
export function makeUploadHandlers(gates: UploadGates, config: UploadsConfig = env) {
  const { GET, POST } = createRouteHandler({
    router: makeUploadRouter(gates),
    config: {
      token: config.UPLOADTHING_TOKEN,
      isDev: config.UPLOADTHING_IS_DEV,
      logLevel: logLevelOf(config),
      logFormat: "json",
      // Outside development the SDK waits for the gate before it answers, so a crash in between is not taken for done.
      ...(config.UPLOADTHING_CALLBACK_URL ? { callbackUrl: config.UPLOADTHING_CALLBACK_URL } : {}),
      ...(config.UPLOADTHING_INGEST_URL ? { ingestUrl: config.UPLOADTHING_INGEST_URL } : {}),
    },
  });
  const post = async (request: Parameters<typeof POST>[0]): Promise<Response> => {
    const answer = await POST(request);
    if (!failedArrivals.has(request)) return answer;
    log.error(
      { err: failedArrivals.get(request) },
      "a stored file could not be taken in; the store will say so again",
    );
    return Response.json({ message: "Not taken in; please send it again." }, { status: 503 });
  };
  return { GET, POST: post };
}
