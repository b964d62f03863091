"use client";

import { useState } from "react";
import { AUDIO_FILES, FileButton } from "@/components/deliveries/file-button";
import { fmt } from "@/components/ui/format";
import { AsideTitle } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { Progress } from "@/components/ui/progress";
import { StatusSentence } from "@/components/ui/status-sentence";
import { startUpload, type UploadProgress } from "@/components/uploads/upload-client";

interface ConfidentialUploadProps {
  ticket: string;
  onDone: () => void;
}

/** One file, once, with the one-use ticket. */
export function ConfidentialUpload({ ticket, onDone }: ConfidentialUploadProps) {
  const [state, setState] = useState<"ready" | "sending" | "arrived">("ready");
  const [progress, setProgress] = useState<UploadProgress | null>(null);
  const [problem, setProblem] = useState<string | null>(null);
  const send = async ([file]: File[]) => {
    if (!file) return;
    setState("sending");
    setProblem(null);
    setProgress(null);
    try {
      const task = await startUpload({
        slug: "confidential",
        subjectId: ticket,
        file,
        onProgress: setProgress,
      });
      await task.done;
      onDone();
      setState("arrived");
    } catch (error) {
      setProblem(error instanceof Error ? error.message : "The upload stopped.");
      setState("ready");
    }
  };
  if (state === "arrived")
    return (
      <StatusSentence below="Only the marketplace’s moderators hear it; each hearing is logged." mark="done">
        Your recording has arrived.
      </StatusSentence>
    );
  return (
    <>
      <AsideTitle below="One file up to 300 MB: WAV, AIFF, FLAC or MP3. Only the marketplace’s moderators hear it, and each hearing is logged.">
        Send your recording
      </AsideTitle>
      <FileButton
        accept={`${AUDIO_FILES},.mp3`}
        busy={state === "sending" && "Sending"}
        kind="main"
        onFiles={(files) => void send(files)}
        wide
      >
        Choose the file
      </FileButton>
      {state === "sending" && progress && (
        <div className="mt-4">
          <Progress
            done={progress.sentBytes}
            doneText={fmt.bytes(progress.sentBytes)}
            label="Your recording"
            of={progress.totalBytes}
            ofText={fmt.bytes(progress.totalBytes)}
          >
            {fmt.bytes(progress.sentBytes)} of {fmt.bytes(progress.totalBytes)} sent
            {progress.secondsLeft !== null && `; about ${fmt.spokenTime(progress.secondsLeft)} left`}
          </Progress>
        </div>
      )}
      {problem && (
        <Problem className="mt-3" live remedy="Choose the same file again to go on where it stopped.">
          {problem}
        </Problem>
      )}
    </>
  );
}
