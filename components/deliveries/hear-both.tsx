"use client";

import { useState } from "react";
import { AlignedListening } from "@/components/review/aligned-listening";
import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import type { CaseOnWire } from "./wire";

type Passage = CaseOnWire["groups"][number]["passages"][number];

interface Render {
  startA: number;
  durationS: number;
  method: string;
  differenceGain: number;
  residualDb: number;
}

const RE_MADE = "tempo and pitch undone";

/** The same seconds of both recordings in step, where the other one is listed: A is the deliverer's own. */
export function HearBoth({ passages }: { passages: readonly Passage[] }) {
  const [openId, setOpenId] = useState<string | null>(null);
  const heard = passages.filter((passage) => passage.heard !== null);
  const open = heard.find((passage) => passage.id === openId);
  if (heard.length === 0) return null;
  return (
    <div className="mt-2">
      <p>Hear both in step:</p>
      <ul className="flex flex-wrap gap-x-4 gap-y-1">
        {heard.slice(0, 12).map((passage) => (
          <li key={passage.id}>
            <Button
              aria-expanded={passage.id === openId}
              kind="quiet"
              onClick={() => setOpenId(passage.id === openId ? null : passage.id)}
            >
              {fmt.spanTenths(passage.startS, passage.endS)}
            </Button>
          </li>
        ))}
      </ul>
      {open?.heard && <InStep heard={open.heard} key={open.id} passage={open} />}
    </div>
  );
}

function InStep({ passage, heard }: { passage: Passage; heard: NonNullable<Passage["heard"]> }) {
  const render = heard.render as unknown as Render;
  const isReMade = render.method === RE_MADE;
  return (
    <div className="mt-2">
      <AlignedListening
        differenceWords={isReMade ? "What differs in the spectra" : "What differs"}
        durationS={render.durationS}
        gainDb={!isReMade && render.differenceGain > 0 ? 20 * Math.log10(render.differenceGain) : 0}
        passages={[
          {
            number: passage.number,
            aFromS: passage.startS,
            aToS: passage.endS,
            bFromS: heard.refStartS,
            bToS: heard.refEndS,
          },
        ]}
        residualClaim={
          isReMade
            ? "The tempo or pitch was changed by itself; undoing that does not bring the waveform back."
            : `What differs is ${fmt.db(Math.abs(render.residualDb), 0)} below A.`
        }
        startAS={render.startA}
        url={`/api/listening/${passage.id}`}
      />
    </div>
  );
}
