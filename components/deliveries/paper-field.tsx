"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Problem } from "@/components/ui/problem";
import { Progress } from "@/components/ui/progress";
import { StatusSentence } from "@/components/ui/status-sentence";
import { startUpload, type UploadProgress } from "@/components/uploads/upload-client";
import { FileButton } from "./file-button";

export interface Paper {
  key: string;
  name: string;
}

interface PaperFieldProps {
  deliveryId: string;
  paper: Paper | null;
  onPaper: (paper: Paper | null) => void;
  words: string;
}

/** A licence, a receipt, a session file: sent at once, and kept with the delivery. */
export function PaperField({ deliveryId, paper, onPaper, words }: PaperFieldProps) {
  const [sending, setSending] = useState<{ name: string; progress: UploadProgress | null } | null>(null);
  const [problem, setProblem] = useState<string | null>(null);
  const send = async ([file]: File[]) => {
    if (!file) return;
    setProblem(null);
    setSending({ name: file.name, progress: null });
    try {
      const task = await startUpload({
        slug: "paper",
        subjectId: deliveryId,
        file,
        onProgress: (progress) => setSending({ name: file.name, progress }),
      });
      const { key } = await task.done;
      onPaper({ key, name: file.name });
    } catch (error) {
      setProblem(error instanceof Error ? error.message : "It did not arrive.");
    } finally {
      setSending(null);
    }
  };
  if (sending)
    return (
      <Progress
        done={sending.progress?.sentBytes ?? 0}
        label={`Sending ${sending.name}`}
        of={sending.progress?.totalBytes || undefined}
        ofText={sending.progress ? fmt.bytes(sending.progress.totalBytes) : ""}
      >
        <span className="wrap-anywhere">{sending.name}</span> is on its way.
      </Progress>
    );
  if (paper)
    return (
      <StatusSentence
        end={
          <Button aria-label={`Take out ${paper.name}`} kind="quiet" onClick={() => onPaper(null)}>
            Take out
          </Button>
        }
        mark="done"
      >
        <a
          className="link target wrap-anywhere"
          download
          href={`/api/deliveries/${deliveryId}/papers/${encodeURIComponent(paper.key)}`}
        >
          {paper.name}
        </a>
      </StatusSentence>
    );
  return (
    <div>
      <FileButton kind="quiet" onFiles={(files) => void send(files)}>
        {words}
      </FileButton>
      {problem && (
        <Problem className="mt-1.5" live remedy="Nothing else is lost; choose the file again.">
          {problem}
        </Problem>
      )}
    </div>
  );
}
