"use client";

import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Problem } from "@/components/ui/problem";
import { Progress } from "@/components/ui/progress";
import type { RunningUpload, Uploads } from "./use-uploads";

function timeLeft(seconds: number | null | undefined): string {
  if (seconds === null || seconds === undefined) return "";
  return seconds < 60
    ? `, about ${fmt.count(Math.max(1, seconds), "second")} left`
    : `, about ${fmt.count(Math.ceil(seconds / 60), "minute")} left`;
}

function wordsOf(upload: RunningUpload): string {
  const { state, progress } = upload;
  if (state === "waiting") return "waits for its turn.";
  if (!progress) return "is being announced.";
  if (state === "paused") return "is paused.";
  if (progress.sentBytes >= progress.totalBytes) return "is sent; the store is putting it together.";
  return `is on its way${timeLeft(progress.secondsLeft)}.`;
}

/** One file on its way: bytes of bytes, time left, pause and go on. */
export function UploadRow({ upload, uploads }: { upload: RunningUpload; uploads: Uploads }) {
  const { file, state, progress, problem } = upload;
  if (state === "failed") {
    return (
      <div className="border-b border-line py-3">
        <Problem
          live
          place={problem}
          remedy="The bytes that arrived are kept, and so are the other files and all you wrote."
        >
          <span className="wrap-anywhere">{file.name}</span> did not arrive.
        </Problem>
        <p className="mt-1.5 ml-[1.4375rem] flex gap-x-5">
          <Button
            aria-label={`Try again: ${file.name}`}
            kind="quiet"
            onClick={() => uploads.again(upload.id)}
          >
            Try again
          </Button>
          <Button
            aria-label={`Leave it out: ${file.name}`}
            kind="quiet"
            onClick={() => uploads.drop(upload.id)}
          >
            Leave it out
          </Button>
        </p>
      </div>
    );
  }
  return (
    <div className="border-b border-line py-3">
      <Progress
        done={progress?.sentBytes ?? 0}
        doneText={fmt.bytes(progress?.sentBytes ?? 0)}
        label={`Sending ${file.name}`}
        of={Math.max(1, file.size)}
        ofText={fmt.bytes(file.size)}
      >
        <b className="font-strong wrap-anywhere">{file.name}</b> {wordsOf(upload)}
      </Progress>
      {progress && progress.sentBytes < progress.totalBytes && (
        <p className="mt-1 flex gap-x-5">
          {state === "paused" ? (
            <Button aria-label={`Go on: ${file.name}`} kind="quiet" onClick={() => uploads.resume(upload.id)}>
              Go on
            </Button>
          ) : (
            <Button aria-label={`Pause: ${file.name}`} kind="quiet" onClick={() => uploads.pause(upload.id)}>
              Pause
            </Button>
          )}
          <Button
            aria-label={`Leave it out: ${file.name}`}
            kind="quiet"
            onClick={() => uploads.drop(upload.id)}
          >
            Leave it out
          </Button>
        </p>
      )}
    </div>
  );
}
