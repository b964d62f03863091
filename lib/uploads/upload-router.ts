import { createRouteHandler, createUploadthing, type FileRouter, UTFiles } from "uploadthing/next";
import { UploadThingError } from "uploadthing/server";
import { z } from "zod";
import { env } from "@/lib/kernel/env";
import { Expected } from "@/lib/kernel/errors";
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
   * A file is stored. May be called twice for one file: key on `file.key`. It must do no more than write a row and
   * enqueue, since a failure here is not repeated by the store. What it returns reaches the browser.
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
    .onUploadComplete(({ file, metadata }) =>
      gate.arrived(
        { key: file.key, name: file.name, sizeBytes: file.size, type: file.type, customId: file.customId },
        Context.parse(metadata.context),
      ),
    );
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

/** The GET and POST of the upload address. The SDK checks the store's signature on callbacks itself. */
export function makeUploadHandlers(gates: UploadGates, config: UploadsConfig = env) {
  return createRouteHandler({
    router: makeUploadRouter(gates),
    config: {
      token: config.UPLOADTHING_TOKEN,
      isDev: config.UPLOADTHING_IS_DEV,
      logLevel: logLevelOf(config),
      logFormat: "json",
      // A callback is answered at once; what it does goes on in this long-lived process.
      handleDaemonPromise: "void",
      ...(config.UPLOADTHING_CALLBACK_URL ? { callbackUrl: config.UPLOADTHING_CALLBACK_URL } : {}),
      ...(config.UPLOADTHING_INGEST_URL ? { ingestUrl: config.UPLOADTHING_INGEST_URL } : {}),
    },
  });
}
