"use client";

import { PassageNumber } from "@/components/contour/passage-marks";
import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Table } from "@/components/ui/table";
import type { CaseGroupView } from "@/lib/review";

type Hit = CaseGroupView["hits"][number];

interface PassageTableProps {
  hit: Hit;
  selected: number;
  onChoose: (number: number) => void;
}

/** The passages as a table of times: the text equivalent of the chart. */
export function PassageTable({ hit, selected, onChoose }: PassageTableProps) {
  const choose = (passage: Hit["passages"][number]) => (
    <Button aria-pressed={passage.number === selected} kind="quiet" onClick={() => onChoose(passage.number)}>
      <PassageNumber number={passage.number} />
      <span className="sr-only">hear passage {passage.number}</span>
    </Button>
  );
  return (
    <div className="mt-5">
      <Table
        caption="Passages"
        captionHidden
        columns={[
          { key: "number", head: "Passage", cell: choose },
          {
            key: "a",
            head: "in A",
            figures: true,
            cell: (passage) => fmt.spanTenths(passage.startS, passage.endS),
          },
          {
            key: "b",
            head: "in B",
            figures: true,
            cell: (passage) => fmt.spanTenths(passage.refStartS, passage.refEndS),
          },
          {
            key: "length",
            head: "Length",
            figures: true,
            cell: (passage) => fmt.seconds(passage.endS - passage.startS),
          },
          { key: "speed", head: "Speed", figures: true, cell: (passage) => fmt.speed(passage.speed) },
          {
            key: "pitch",
            head: "Semitones",
            figures: true,
            cell: (passage) => fmt.semitones(passage.pitchSemitones),
          },
          {
            key: "landmarks",
            head: "Landmarks",
            figures: true,
            cell: (passage) => `${passage.landmarksMatched} of ${passage.landmarksTotal}`,
          },
        ]}
        isSelected={(passage) => passage.number === selected}
        rowKey={(passage) => passage.id}
        rows={hit.passages}
        sentence={(passage) => (
          <>
            {choose(passage)} A from {fmt.timeTenths(passage.startS)} equals B from{" "}
            {fmt.timeTenths(passage.refStartS)} for {fmt.seconds(passage.endS - passage.startS)},{" "}
            {fmt.speed(passage.speed)}, {fmt.semitones(passage.pitchSemitones)} semitones,{" "}
            {passage.landmarksMatched} of {passage.landmarksTotal} landmarks.
          </>
        )}
      />
    </div>
  );
}
