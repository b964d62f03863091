"use client";

import { Disclosure } from "@/components/ui/disclosure";
import { fmt } from "@/components/ui/format";
import { Problem } from "@/components/ui/problem";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Table } from "@/components/ui/table";
import { exactLengthToleranceS, findVersionRole } from "@/lib/catalogue/version-roles";
import { LengthChart } from "./length-chart";
import { useContour } from "./version-contour";
import { type CheckOnWire, checksOf, type VersionOnWire } from "./wire";

const VERDICTS = { pass: "passes", warn: "worth a look", return: "needs a new file" };

function placesOf(check: CheckOnWire): string {
  const all = check.placesS ?? (check.atS === undefined ? [] : [check.atS]);
  if (all.length === 0) return "the whole file";
  const first = all.slice(0, 6).map(fmt.timeTenths);
  return all.length > 6 ? `${first.join(", ")} and ${all.length - 6} more` : fmt.list(first);
}

function placeSentence(check: CheckOnWire): string {
  const at = check.placesS || (check.atS ?? 0) > 0 ? ` At ${placesOf(check)}.` : "";
  return `Measured ${check.measured}; the limit: ${check.limit}.${at}`;
}

/** What needs doing first, with its measured value, limit, place and remedy; then what is worth a look; then the rest. */
export function VersionChecks({ version }: { version: VersionOnWire }) {
  const checks = checksOf(version);
  const contour = useContour(version.contour);
  const role = findVersionRole(version.versionRole);
  const exactS = role && "exactS" in role ? role.exactS : undefined;
  const returns = checks.filter((check) => check.verdict === "return");
  const warnings = checks.filter((check) => check.verdict === "warn");
  return (
    <div className="mt-2 space-y-3">
      {returns.map((check) => (
        <div key={check.check}>
          <Problem place={placeSentence(check)}>
            {check.code}: {check.what}
          </Problem>
          <div className="ml-[1.4375rem]">
            {check.check === "length" && exactS && contour && (
              <LengthChart data={contour} nominalS={exactS} toleranceS={exactLengthToleranceS} />
            )}
            {check.remedy && (
              <p className="max-w-measure">{check.remedy} The other files and all you wrote are kept.</p>
            )}
          </div>
        </div>
      ))}
      {warnings.map((check) => (
        <StatusSentence
          below={[placeSentence(check), check.remedy].filter(Boolean).join(" ")}
          key={check.check}
          mark="open"
        >
          Worth a look: {check.what}
        </StatusSentence>
      ))}
      {checks.length > 0 && (
        <Disclosure words={`Show all ${checks.length} checks`}>
          <Table
            caption="Every check of this file"
            captionHidden
            columns={[
              { key: "what", head: "Check", cell: (check) => `${check.code} ${check.check}` },
              { key: "measured", head: "Measured", cell: (check) => check.measured },
              { key: "limit", head: "Limit", cell: (check) => check.limit },
              { key: "verdict", head: "Answer", cell: (check) => VERDICTS[check.verdict] },
            ]}
            rowKey={(check) => check.check}
            rows={checks}
            sentence={(check) => (
              <>
                {check.code} {check.check}: {check.measured}, {VERDICTS[check.verdict]}.
                <span className="block text-small text-ink-soft">{check.limit}</span>
              </>
            )}
          />
        </Disclosure>
      )}
    </div>
  );
}
