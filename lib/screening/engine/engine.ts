import { ENGINE_VERSION } from "@/lib/fingerprint";
import { system } from "@/lib/kernel/actor";
import { type CallOptions, ThreadHost } from "@/lib/kernel/thread";
import { readIndexChanges } from "../fingerprints";
import type { FoundHit } from "../found";
import type { FingerprintFileResult } from "./fingerprint-file";
import type { QueryRow, ReferenceRow } from "./thread";

const MEMORY_MB = 4096;
const actor = system("screening.engine");

/** The engine as its own process sees it: one thread, its index kept current from the change log. */
class Engine {
  private readonly thread = new ThreadHost(new URL("./thread.ts", import.meta.url), MEMORY_MB);
  private loadedSeq = 0;
  private loadedGeneration = -1;
  private held = { recordings: 0, hours: 0 };

  fingerprintFile(
    args: { path: string; isLoop?: boolean },
    onProgress?: CallOptions["onProgress"],
  ): Promise<FingerprintFileResult> {
    return this.thread.call("fingerprintFile", args, {
      timeoutS: 1800,
      ...(onProgress ? { onProgress } : {}),
    });
  }

  /** Brings the index up to the head as it is now. Returns the sequence it stands at and what it holds. */
  async catchUp(): Promise<{ seq: number; recordings: number; hours: number }> {
    for (;;) {
      const reset = this.thread.generation !== this.loadedGeneration;
      const after = reset ? 0 : this.loadedSeq;
      const changes = await readIndexChanges(actor, { after, engineVersion: ENGINE_VERSION });
      if (!reset && changes.through === this.loadedSeq && changes.through >= changes.head) break;
      const last = new Map(changes.log.map((row) => [`${row.subjectKind}:${row.subjectId}`, row.change]));
      const add = changes.fingerprints.filter(
        (row) => last.get(`${row.subjectKind}:${row.subjectId}`) === "add",
      ) as ReferenceRow[];
      const remove = changes.log.filter(
        (row) => last.get(`${row.subjectKind}:${row.subjectId}`) === "remove",
      );
      this.held = await this.thread.call("applyChanges", { reset, add, remove }, { timeoutS: 600 });
      this.loadedSeq = changes.through;
      this.loadedGeneration = this.thread.generation;
      if (changes.through >= changes.head) break;
    }
    return { seq: this.loadedSeq, ...this.held };
  }

  search(
    args: { query: QueryRow[]; exclude: string[]; deep?: boolean },
    onProgress?: CallOptions["onProgress"],
  ): Promise<FoundHit[]> {
    return this.thread.call("search", args, { timeoutS: 900, ...(onProgress ? { onProgress } : {}) });
  }

  matchDirect(args: { query: QueryRow[]; references: ReferenceRow[] }): Promise<FoundHit[]> {
    return this.thread.call("matchDirect", args, { timeoutS: 300 });
  }

  close(): Promise<void> {
    return this.thread.close();
  }
}

let instance: Engine | null = null;

export function screeningEngine(): Engine {
  instance ??= new Engine();
  return instance;
}

export async function closeScreeningEngine(): Promise<void> {
  await instance?.close();
  instance = null;
}
