import type { DeliveryView } from "@/lib/deliveries";
import type { DelivererCase } from "@/lib/review";

/** A value as JSON brings it: times are text. */
export type Wire<T> = T extends Date
  ? string
  : T extends readonly (infer Item)[]
    ? Wire<Item>[]
    : T extends object
      ? { [Key in keyof T]: Wire<T[Key]> }
      : T;

export type DeliveryOnWire = Wire<DeliveryView>;
export type VersionOnWire = DeliveryOnWire["versions"][number];
export type CaseOnWire = Wire<NonNullable<DelivererCase>>;

export interface DeliveryPage {
  delivery: DeliveryOnWire;
  caseOf: CaseOnWire | null;
}

/** What a technical check said, as it is kept with its version. */
export interface CheckOnWire {
  code: string;
  check: string;
  verdict: "pass" | "warn" | "return";
  what: string;
  measured: string;
  limit: string;
  atS?: number;
  placesS?: number[];
  remedy?: string;
}

export const checksOf = (version: VersionOnWire): CheckOnWire[] =>
  (version.checks ?? []) as unknown as CheckOnWire[];

export interface MeasuresOnWire {
  durationS: number;
  integratedLufs?: number | null;
  truePeakDbtp?: number | null;
  tempo?: { bpm?: number } | null;
  key?: { key?: string; mode?: string } | null;
}

export const measuresOf = (version: VersionOnWire): MeasuresOnWire | null =>
  version.measures as unknown as MeasuresOnWire | null;

export interface FactsOnWire {
  container: string;
  sampleRateHz: number;
  bitDepth: number | null;
  channels: number;
}

export const factsOf = (version: VersionOnWire): FactsOnWire | null =>
  version.facts as unknown as FactsOnWire | null;
