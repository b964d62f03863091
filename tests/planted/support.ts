import { rmSync } from "node:fs";
import { mkdtemp } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { SharedLoopId } from "@/db/seed/data";
import { cues, plantedCases, sharedMaterial } from "@/db/seed/data";
import {
  loopFacts,
  renderCase,
  renderLoop,
  renderReported,
  renderVersion,
  type StereoAudio,
  writeWav,
} from "@/fixtures/audio";
import { ThreadHost } from "@/lib/kernel/thread";
import {
  type DeliveryFacts,
  type ExplainedHit,
  explainHits,
  type FoundHit,
  type Outcome,
  outcomeOf,
} from "@/lib/screening";
import type { FingerprintFileResult } from "@/lib/screening/engine/fingerprint-file";

export type Reference =
  | { readonly cue: number; readonly seconds?: number }
  | { readonly loop: SharedLoopId }
  | { readonly reported: string };

export interface Asked extends Partial<DeliveryFacts> {
  readonly seconds?: number;
  readonly deep?: boolean;
  /** A listed cue is looked at against all others. */
  readonly exceptCue?: number;
  /** Deliver a listed cue's full mix in the case's place. */
  readonly audioOfCue?: number;
  readonly otherTitles?: Parameters<typeof explainHits>[1]["otherTitles"];
}

export interface Screened {
  readonly outcome: Outcome;
  readonly words: string;
  readonly hits: ExplainedHit[];
  /** Of the band that holds, surest first. */
  readonly held: ExplainedHit[];
  readonly mid: FingerprintFileResult["rows"][number];
}

const usualS = 60;

const registeredLoops = new Map(
  sharedMaterial.map((row) => [
    row.id as string,
    {
      id: row.id as string,
      code: row.id as string,
      title: row.title,
      lengthS: loopFacts[row.id].lengthS,
      coverageMaxBps: row.id === "LP-007" ? 5000 : 10_000,
      conditionWords: `Its licence: ${row.condition}.`,
    },
  ]),
);

const familyFacts = new Map(
  cues.map((cue) => [
    `recording:${cue.number}`,
    {
      familyId: `family ${cue.number}`,
      libraryId: cue.library as string,
      writerIds: cue.writers.map((share) => share.person as string),
      title: cue.title,
    },
  ]),
);

function render(reference: Reference): StereoAudio {
  if ("loop" in reference) return renderLoop(reference.loop);
  if ("reported" in reference) return renderReported(reference.reported);
  return renderVersion(reference.cue, "full", { seconds: reference.seconds ?? usualS });
}

function subjectOf(reference: Reference): { subjectKind: string; subjectId: string } {
  if ("loop" in reference) return { subjectKind: "loop", subjectId: reference.loop };
  if ("reported" in reference) return { subjectKind: "reported", subjectId: reference.reported };
  return { subjectKind: "recording", subjectId: String(reference.cue) };
}

/** The screening engine's own thread over rendered files: decoding, fingerprints of each channel, index and search. */
export class ScreeningDesk {
  private readonly thread = new ThreadHost(
    new URL("../../lib/screening/engine/thread.ts", import.meta.url),
    2048,
  );
  private folder = "";
  private files = 0;
  private recordings = 0;

  async open(references: readonly Reference[]): Promise<void> {
    this.folder = await mkdtemp(join(tmpdir(), "planted-"));
    const add = await Promise.all(
      references.map(async (reference) => {
        const { rows } = await this.print(render(reference), "loop" in reference);
        return { ...subjectOf(reference), packed: rows.find((row) => row.channel === "mid")!.packed };
      }),
    );
    const state = await this.thread.call<{ recordings: number }>(
      "applyChanges",
      { reset: true, add, remove: [] },
      { timeoutS: 600 },
    );
    this.recordings = state.recordings;
  }

  async close(): Promise<void> {
    await this.thread.close();
    rmSync(this.folder, { recursive: true, force: true });
  }

  private async print(audio: StereoAudio, isLoop = false): Promise<FingerprintFileResult> {
    const path = join(this.folder, `${this.files++}.wav`);
    writeWav(path, audio);
    return this.thread.call("fingerprintFile", { path, isLoop }, { timeoutS: 600 });
  }

  /** Delivers a planted case as its uploader does, and says what the uploader's library would be told. */
  async screen(caseId: string, asked: Asked = {}): Promise<Screened> {
    const row = plantedCases.find((candidate) => candidate.id === caseId)!;
    const { seconds, deep, exceptCue, audioOfCue, otherTitles, ...changes } = asked;
    const options = { seconds: seconds ?? usualS };
    const audio = audioOfCue ? renderVersion(audioOfCue, "full", options) : renderCase(caseId, options);
    const { rows } = await this.print(audio);
    const query = rows.map(({ channel, packed }) => ({ channel, packed }));
    const found = await this.thread.call<FoundHit[]>(
      "search",
      { query, exclude: exceptCue ? [`recording:${exceptCue}`] : [], deep: deep ?? false },
      { timeoutS: 600 },
    );
    const deliverer = row.uploader ?? "nobody";
    const delivery: DeliveryFacts = {
      familyId: "family new",
      libraryId: row.deliveredTo ?? "none",
      delivererId: deliverer,
      writerIds: [deliverer],
      declaredLoops: [],
      expectsFamilyMatch: false,
      durationS: audio.channels[0].length / audio.sampleRateHz,
      ...changes,
    };
    const hits = explainHits(found, {
      delivery,
      references: familyFacts,
      loops: registeredLoops,
      otherTitles: otherTitles ?? [],
    });
    const mid = rows.find((each) => each.channel === "mid")!;
    const comparable = rows.some((each) => each.comparable);
    const verdict = outcomeOf(hits, {
      comparable,
      reason: `only ${mid.contentS.toFixed(1)} s of it carry sound that can be compared`,
      recordingsCompared: this.recordings,
      familyMatchMissing:
        delivery.expectsFamilyMatch && comparable && !hits.some((hit) => hit.explainedBy === "family"),
    });
    const held = hits.filter((hit) => hit.band === "hold").sort((a, b) => b.evidence - a.evidence);
    return { ...verdict, hits, held, mid };
  }
}

export const namesOf = (hits: readonly ExplainedHit[]): string[] =>
  hits.map((hit) => `${hit.subjectKind} ${hit.subjectId}`).sort();

export const offsetsS = (hit: ExplainedHit): number[] =>
  hit.passages.map((passage) => passage.refStartS - passage.speed * passage.startS);
