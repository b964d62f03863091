import { fmt } from "@/components/ui/format";
import { Progress } from "@/components/ui/progress";
import { progressWords, roleHead } from "./version-words";
import type { VersionOnWire } from "./wire";

/** What is really being done to this version now. */
export function VersionProgress({ version }: { version: VersionOnWire }) {
  const { progress } = version;
  const reading = progress && (progress.words === "reading" || progress.words === "measuring");
  return (
    <Progress
      done={progress?.done ?? 0}
      label={`${roleHead(version.versionRole)}: ${version.state === "arrived" ? "measuring" : "screening"}`}
      of={progress?.of || undefined}
      {...(reading && progress.of
        ? { doneText: fmt.time(progress.done), ofText: fmt.time(progress.of) }
        : {})}
    >
      <b className="font-strong">{roleHead(version.versionRole)}</b>: {progressWords(version)}
    </Progress>
  );
}
