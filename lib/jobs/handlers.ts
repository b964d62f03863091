import type { MessageName, MessagePayload } from "@/lib/kernel/messages";

export interface JobContext {
  jobId: string;
  attempt: number;
  /** True when no further attempt follows this one. */
  isLast: boolean;
  /** Shown to whoever waits: what is being done, how much of how much. Written at most twice a second. */
  progress: (words: string, done: number, of: number) => void;
  signal: AbortSignal;
}

export type JobHandler<N extends MessageName> = (
  payload: MessagePayload<N>,
  context: JobContext,
) => Promise<void>;
export type Handlers = { [N in MessageName]?: { handle: JobHandler<N>; timeoutS: number; heavy?: boolean } };

/**
 * The handlers of one room. Handlers are idempotent and call verbs as the system actor; `heavy` ones decode or search
 * audio and run one at a time.
 */
export const defineHandlers = <const H extends Handlers>(handlers: H): H => handlers;
