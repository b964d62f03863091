"use client";

import { type DragEvent, useEffect, useState } from "react";
import { cx } from "@/components/ui/cx";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { StatusSentence } from "@/components/ui/status-sentence";
import { unfinishedUploads } from "@/components/uploads/upload-memory";
import { DraftVersion } from "./draft-version";
import { AUDIO_FILES, FileButton } from "./file-button";
import { UploadRow } from "./upload-row";
import type { Uploads } from "./use-uploads";
import { type DeliveryOnWire, measuresOf } from "./wire";

interface FilesStepProps {
  delivery: DeliveryOnWire;
  ending: string | null;
  uploads: Uploads;
  onChanged: () => void;
}

/** Seconds that fill the width, so that the strips of one delivery share their scale. */
export function deliveryScaleS(delivery: DeliveryOnWire): number {
  return Math.max(10, ...delivery.versions.map((version) => measuresOf(version)?.durationS ?? 0));
}

/** Files of an earlier visit that did not arrive whole; picked again, they go on where they stopped. */
function useUnfinished(deliveryId: string, running: number) {
  const [names, setNames] = useState<{ name: string; sizeBytes: number }[]>([]);
  // biome-ignore lint/correctness/useExhaustiveDependencies: read again whenever an upload begins or ends
  useEffect(() => setNames(unfinishedUploads(deliveryId)), [deliveryId, running]);
  return names;
}

export function FilesStep({ delivery, ending, uploads, onChanged }: FilesStepProps) {
  const [isOver, setOver] = useState(false);
  const fresh = uploads.running.filter((upload) => upload.replaces === null);
  const unfinished = useUnfinished(delivery.id, uploads.running.length).filter(
    ({ name, sizeBytes }) =>
      !uploads.running.some((upload) => upload.file.name === name && upload.file.size === sizeBytes),
  );
  const scaleS = deliveryScaleS(delivery);
  const firstBad = delivery.versions.find(
    (version) => version.state === "returned" || version.state === "unreadable",
  );
  const drop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    const files = [...event.dataTransfer.files];
    if (files.length > 0) uploads.add(files);
  };
  return (
    // biome-ignore lint/a11y/noStaticElementInteractions: dropping files is a second way; the button is the first
    <div
      className={cx("rounded-plain", isOver && "outline-2 outline-offset-8 outline-depth outline-dashed")}
      onDragLeave={() => setOver(false)}
      onDragOver={(event) => {
        event.preventDefault();
        setOver(true);
      }}
      onDrop={drop}
    >
      {delivery.versions.length === 0 && uploads.running.length === 0 && (
        <Empty>
          Each file of the family stands here with what was measured: the full mix first, then its bed, its
          cutdowns and the others. Several at once are welcome.
        </Empty>
      )}
      <ul>
        {delivery.versions.map((version) => (
          <DraftVersion
            deliveryId={delivery.id}
            ending={ending}
            isMain={version === firstBad}
            key={version.id}
            onChanged={onChanged}
            scaleS={scaleS}
            title={delivery.title}
            uploads={uploads}
            version={version}
          />
        ))}
      </ul>
      {fresh.map((upload) => (
        <UploadRow key={upload.id} upload={upload} uploads={uploads} />
      ))}
      {unfinished.map(({ name, sizeBytes }) => (
        <StatusSentence
          below={`${fmt.bytes(sizeBytes)}; pick the same file again and it goes on where it stopped.`}
          className="border-b border-line py-3"
          key={`${name}:${sizeBytes}`}
          mark="half"
        >
          <span className="wrap-anywhere">{name}</span> was not finished.
        </StatusSentence>
      ))}
      <div className="mt-4 flex flex-wrap items-center gap-x-5 gap-y-2">
        <FileButton
          accept={AUDIO_FILES}
          kind={delivery.versions.length === 0 && fresh.length === 0 ? "main" : "plain"}
          multiple
          onFiles={(files) => uploads.add(files)}
        >
          Add files
        </FileButton>
        <p className="max-w-measure text-small text-ink-soft">
          WAV, Broadcast Wave or AIFF, best at 48 kHz and 24 bit; FLAC is taken too. Up to 8 GiB a file.
        </p>
      </div>
      <p aria-live="polite" className="sr-only">
        {uploads.running.length > 0
          ? `${fmt.count(uploads.running.length, "file")} on the way, ${uploads.arrived} arrived.`
          : uploads.arrived > 0
            ? `${fmt.count(uploads.arrived, "file")} arrived.`
            : ""}
      </p>
    </div>
  );
}
