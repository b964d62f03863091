import { genUploader } from "uploadthing/client";
import type { UploadRouter, UploadSlug } from "@/lib/uploads";
import { Pace } from "./pace";
import { forgetUpload, rememberingFetch } from "./upload-memory";

export interface UploadProgress {
  sentBytes: number;
  totalBytes: number;
  /** At the pace of the last seconds; null while it is not known or the upload is paused. */
  secondsLeft: number | null;
}

export interface UploadTask {
  file: File;
  pause(): void;
  resume(): void;
  /** The key of the stored file and what the site answered about it. Rejects with a sentence that can be shown. */
  done: Promise<{ key: string; answer: Record<string, string> | null }>;
}

export interface StartUpload {
  slug: UploadSlug;
  /** The delivery, case or notice that the file belongs to. */
  subjectId: string;
  file: File;
  onProgress(progress: UploadProgress): void;
}

function sentence(error: unknown): Error {
  const said = error instanceof Error && error.message ? error.message : "The upload stopped.";
  return new Error(said, { cause: error });
}

/** The store said no, so its signed address is of no more use; a broken line is another matter. */
function isRefusal(error: unknown): boolean {
  return error instanceof Error && /^XHR failed 4\d\d/.test(error.message);
}

const { createUpload } = genUploader<UploadRouter>({
  url: "/api/uploadthing",
  package: "sedgewren",
  fetch: rememberingFetch,
});

/**
 * Starts one upload that can be paused and resumed, also by picking the same file again after a reload; the bytes that
 * the store holds are never sent again.
 */
export async function startUpload({ slug, subjectId, file, onProgress }: StartUpload): Promise<UploadTask> {
  const pace = new Pace();
  let isPaused = false;
  let sentBytes = 0;
  const report = () =>
    onProgress({ sentBytes, totalBytes: file.size, secondsLeft: isPaused ? null : pace.left(file.size) });
  const upload = await createUpload(slug, {
    files: [file],
    input: { subjectId },
    onUploadProgress: ({ loaded }) => {
      // The body carries a little more than the file itself.
      sentBytes = Math.min(loaded, file.size);
      pace.add(sentBytes);
      report();
    },
  }).catch((error: unknown) => {
    throw sentence(error);
  });
  return {
    file,
    pause: () => {
      if (isPaused) return;
      isPaused = true;
      pace.clear();
      upload.pauseUpload(file);
      report();
    },
    resume: () => {
      if (!isPaused) return;
      isPaused = false;
      upload.resumeUpload(file);
    },
    done: upload.done(file).then(
      (result) => {
        forgetUpload(slug, subjectId, file);
        return { key: result.key, answer: result.serverData };
      },
      (error: unknown) => {
        if (isRefusal(error)) forgetUpload(slug, subjectId, file);
        throw sentence(error);
      },
    ),
  };
}
