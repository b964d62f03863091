"use client";

import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import type { Brief } from "@/lib/catalogue/schemas";
import { briefQuery } from "./brief-query";
import { CueList } from "./cue-list";
import type { FoundPage } from "./find-types";

/** Everything that one library has on sale, newest first. */
export function LibraryCues({ brief, first, name }: { brief: Brief; first: FoundPage; name: string }) {
  return (
    <CueList
      brief={brief}
      empty={() => <Empty>{name} has listed nothing yet; its cues would be here.</Empty>}
      first={first}
      firstQuery={briefQuery(brief)}
      head={({ total }) => (
        <p className="mb-2.5 text-lead">
          {total === 0
            ? "Nothing is on sale."
            : `${fmt.count(total, "cue is", "cues are")} on sale, newest first.`}
        </p>
      )}
      production={null}
    />
  );
}
