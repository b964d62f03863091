"use client";

import { Caution } from "@/components/ui/caution";
import { Mark } from "@/components/ui/mark";
import { Problem } from "@/components/ui/problem";
import { CertificatePart } from "./certificate-part";
import { AUDIO_FILES, FileButton } from "./file-button";
import { mergedPlaces } from "./merged-places";
import { PassagePlays } from "./passage-plays";
import { UploadRow } from "./upload-row";
import type { Uploads } from "./use-uploads";
import { VersionChecks } from "./version-checks";
import { VersionContour } from "./version-contour";
import { VersionProgress } from "./version-progress";
import { factsLine, markOfState, RELATION_WORDS, roleHead } from "./version-words";
import { checksOf, type DeliveryOnWire, type VersionOnWire } from "./wire";

interface AffairsVersionProps {
  delivery: DeliveryOnWire;
  version: VersionOnWire;
  uploads: Uploads;
  ending: string | null;
  scaleS: number;
  zone: string;
  isMain: boolean;
}

const isTechnical = (version: VersionOnWire) =>
  version.state === "returned" && checksOf(version).some((check) => check.verdict === "return");

function headOf(version: VersionOnWire): string {
  if (isTechnical(version)) return "needs a new file from you.";
  if (version.state === "returned") return "was sent back to you.";
  if (version.state === "unreadable") return "cannot be read.";
  return version.words.charAt(0).toLowerCase() + version.words.slice(1);
}

/** One version after signing: its shape and sentence, what is happening to it now, what it matches and why that is well. */
export function AffairsVersion(props: AffairsVersionProps) {
  const { delivery, version, uploads, ending, scaleS, zone, isMain } = props;
  const name = roleHead(version.versionRole);
  const needsFile = version.state === "returned" || version.state === "unreadable";
  const replacement = uploads.running.find((upload) => upload.replaces === version.id);
  const facts = factsLine(version);
  const working = version.state === "arrived" || version.state === "screening";
  return (
    <li
      className="grid grid-cols-[1.4375rem_minmax(0,1fr)] border-b border-line py-3.5"
      id={version.recordingId ?? version.id}
    >
      <Mark className="mt-[0.22em]" kind={markOfState(version.state)} />
      <div className="min-w-0">
        {working ? (
          <VersionProgress version={version} />
        ) : (
          <p className={markOfState(version.state) === "warn" ? "text-magenta" : "max-w-measure"}>
            <b className="font-strong">{name}</b>: {headOf(version)}
          </p>
        )}
        {version.contour && (
          <div className="mt-2">
            <VersionContour
              ending={ending}
              playable={delivery.mayHear}
              scaleS={scaleS}
              title={delivery.title}
              version={version}
            />
          </div>
        )}
        {facts && <p className="mt-1.5 text-small text-ink-soft">{facts}</p>}
        {version.state === "unreadable" && <Problem className="mt-2">{version.words}</Problem>}
        {version.state === "returned" && !isTechnical(version) && (
          <p className="mt-2 max-w-measure">{version.words}</p>
        )}
        {isTechnical(version) && <VersionChecks version={version} />}
        <Matches delivery={delivery} version={version} />
        {needsFile && delivery.isDeliverer && (
          <div className="mt-3">
            {replacement ? (
              <UploadRow upload={replacement} uploads={uploads} />
            ) : (
              <FileButton
                accept={AUDIO_FILES}
                kind={isMain ? "main" : "plain"}
                onFiles={(files) => uploads.add(files.slice(0, 1), version.id)}
                wide={isMain}
              >
                {`Replace the ${name.toLowerCase()}`}
              </FileButton>
            )}
          </div>
        )}
        <CertificatePart version={version} zone={zone} />
      </div>
    </li>
  );
}

const ENGLISH_LIST = (words: readonly string[]) =>
  new Intl.ListFormat("en-GB", { type: "disjunction" }).format(words);

/** What is not explained yet is one question, however many references it lines up with. */
function openQuestion({ matches, state }: VersionOnWire) {
  const isHeld = state === "held" || state === "returned";
  const open = isHeld ? matches.filter((match) => match.explainedBy === null) : [];
  if (open.length === 0) return [];
  const looks = [...new Set(open.map((match) => RELATION_WORDS[match.relation] ?? match.relation))];
  return [
    {
      words: `Part of it lines up with another recording; it looks like ${ENGLISH_LIST(looks)}. Nothing is decided by that.`,
      places: mergedPlaces(open.flatMap((match) => match.passages)),
    },
  ];
}

/** Every match with its places in the deliverer's own file, and how it is explained. */
function Matches({ delivery, version }: { delivery: DeliveryOnWire; version: VersionOnWire }) {
  const explained = version.matches.filter((match) => match.explainedBy && match.explainedBy !== "family");
  const told = [
    ...openQuestion(version),
    ...explained.map((match) => ({
      words: match.explanation ?? "",
      places: mergedPlaces(match.passages),
    })),
  ];
  if (told.length === 0) return null;
  return (
    <ul className="mt-2 space-y-2">
      {told.map((match) => (
        <li key={match.words}>
          <p className="max-w-measure">{match.words}</p>
          <div className="mt-0.5 text-small">
            <PassagePlays
              passages={match.places}
              playable={delivery.mayHear}
              title={delivery.title}
              version={version}
            />
          </div>
        </li>
      ))}
      <li>
        <Caution notCompared="Melody, harmony and lyrics were not compared." />
      </li>
    </ul>
  );
}
