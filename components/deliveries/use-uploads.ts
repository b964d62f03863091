"use client";

import { useEffect, useRef, useState } from "react";
import { startUpload, type UploadProgress, type UploadTask } from "@/components/uploads/upload-client";

const AT_ONCE = 3;

export interface RunningUpload {
  id: number;
  file: File;
  /** The version whose file this one takes the place of. */
  replaces: string | null;
  state: "waiting" | "sending" | "paused" | "failed";
  progress: UploadProgress | null;
  problem: string | null;
}

export interface Uploads {
  running: readonly RunningUpload[];
  arrived: number;
  add: (files: readonly File[], replaces?: string | null) => void;
  pause: (id: number) => void;
  resume: (id: number) => void;
  again: (id: number) => void;
  drop: (id: number) => void;
}

const waitingRow = (id: number, file: File, replaces: string | null): RunningUpload => ({
  id,
  file,
  replaces,
  state: "waiting",
  progress: null,
  problem: null,
});

type SetRunning = (change: (rows: readonly RunningUpload[]) => readonly RunningUpload[]) => void;

/** When the line is back, what broke off goes on by itself. */
function useBackOnline(setRunning: SetRunning): void {
  useEffect(() => {
    const back = () =>
      setRunning((rows) => rows.map((row) => (row.state === "failed" ? { ...row, state: "waiting" } : row)));
    window.addEventListener("online", back);
    return () => window.removeEventListener("online", back);
  }, [setRunning]);
}

function useAskBeforeLeaving(isBusy: boolean): void {
  useEffect(() => {
    if (!isBusy) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", ask);
    return () => window.removeEventListener("beforeunload", ask);
  }, [isBusy]);
}

/** Files on their way into a delivery: three at a time, each with its own pause; a broken one is kept and tried again. */
export function useUploads(deliveryId: string, onArrived: () => void): Uploads {
  const [running, setRunning] = useState<readonly RunningUpload[]>([]);
  const [arrived, setArrived] = useState(0);
  const tasks = useRef(new Map<number, UploadTask>());
  const started = useRef(new Set<number>());
  const nextId = useRef(1);
  const tell = useRef(onArrived);
  useEffect(() => {
    tell.current = onArrived;
  });

  const change = (id: number, values: Partial<RunningUpload>) =>
    setRunning((rows) => rows.map((row) => (row.id === id ? { ...row, ...values } : row)));
  const remove = (id: number) => setRunning((rows) => rows.filter((row) => row.id !== id));

  useEffect(() => {
    const begin = async (upload: RunningUpload) => {
      const subjectId = upload.replaces ? `${deliveryId}/${upload.replaces}` : deliveryId;
      try {
        const task = await startUpload({
          slug: "master",
          subjectId,
          file: upload.file,
          onProgress: (progress) => change(upload.id, { progress }),
        });
        tasks.current.set(upload.id, task);
        await task.done;
        remove(upload.id);
        setArrived((count) => count + 1);
        tell.current();
      } catch (error) {
        change(upload.id, {
          state: "failed",
          problem: error instanceof Error ? error.message : "It stopped.",
        });
      } finally {
        tasks.current.delete(upload.id);
        started.current.delete(upload.id);
      }
    };
    const free = AT_ONCE - running.filter((row) => row.state === "sending").length;
    const waiting = running.filter((row) => row.state === "waiting" && !started.current.has(row.id));
    for (const upload of waiting.slice(0, Math.max(0, free))) {
      started.current.add(upload.id);
      change(upload.id, { state: "sending", problem: null });
      void begin(upload);
    }
  });

  useBackOnline(setRunning);
  useAskBeforeLeaving(running.length > 0);

  return {
    running,
    arrived,
    add: (files, replaces = null) =>
      setRunning((rows) => [...rows, ...files.map((file) => waitingRow(nextId.current++, file, replaces))]),
    pause: (id) => {
      tasks.current.get(id)?.pause();
      change(id, { state: "paused" });
    },
    resume: (id) => {
      tasks.current.get(id)?.resume();
      change(id, { state: "sending" });
    },
    again: (id) => change(id, { state: "waiting", problem: null }),
    drop: (id) => {
      tasks.current.get(id)?.pause();
      remove(id);
    },
  };
}
