"use client";

import { Caution } from "@/components/ui/caution";
import { fmt } from "@/components/ui/format";
import { HearBoth } from "./hear-both";
import { mergedPlaces } from "./merged-places";
import { PassagePlays } from "./passage-plays";
import { roleHead } from "./version-words";
import type { CaseOnWire, DeliveryOnWire } from "./wire";

type Group = CaseOnWire["groups"][number];

/** Where in the deliverer's own recordings a case is about, by version; the other side is named only as far as it may be. */
export function CasePlaces({ delivery, caseOf }: { delivery: DeliveryOnWire; caseOf: CaseOnWire }) {
  return (
    <div className="space-y-3">
      {caseOf.groups.map((group, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: groups have no name of their own on this side
        <GroupPlaces delivery={delivery} group={group} key={index} />
      ))}
      <Caution notCompared="Melody, harmony and lyrics were not compared." />
    </div>
  );
}

export function GroupPlaces({ delivery, group }: { delivery: DeliveryOnWire; group: Group }) {
  const versions = delivery.versions.filter((version) =>
    group.passages.some((passage) => passage.recordingId === version.recordingId),
  );
  if (versions.length === 0) return null;
  return (
    <div>
      {versions.map((version) => {
        const passages = mergedPlaces(
          group.passages.filter((passage) => passage.recordingId === version.recordingId),
        );
        const count = fmt.countWord(passages.length, "place");
        return (
          <div key={version.id}>
            <p>
              {count.charAt(0).toUpperCase() + count.slice(1)} in your{" "}
              {roleHead(version.versionRole).toLowerCase()} {passages.length === 1 ? "lines" : "line"} up with{" "}
              {group.reference}.
            </p>
            <PassagePlays
              passages={passages}
              playable={delivery.mayHear}
              title={delivery.title}
              version={version}
            />
          </div>
        );
      })}
      <HearBoth passages={group.passages} />
    </div>
  );
}
