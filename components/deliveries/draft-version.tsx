"use client";

import { useId, useState } from "react";
import { changeVersion, takeVersionOut } from "@/app/(composer)/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { SelectField, TextField } from "@/components/ui/field";
import { fmt } from "@/components/ui/format";
import { Mark } from "@/components/ui/mark";
import { Problem } from "@/components/ui/problem";
import { versionRoles } from "@/lib/catalogue/version-roles";
import { AUDIO_FILES, FileButton } from "./file-button";
import { UploadRow } from "./upload-row";
import type { Uploads } from "./use-uploads";
import { VersionChecks } from "./version-checks";
import { VersionContour } from "./version-contour";
import { VersionProgress } from "./version-progress";
import { factsLine, markOfState, roleHead } from "./version-words";
import { checksOf, type VersionOnWire } from "./wire";

interface DraftVersionProps {
  deliveryId: string;
  title: string;
  ending: string | null;
  version: VersionOnWire;
  scaleS: number;
  uploads: Uploads;
  onChanged: () => void;
  /** The one main action of the page, where this is the first version that needs a file. */
  isMain: boolean;
}

const splitRole = (role: string): [listed: string, name: string] => {
  const colon = role.indexOf(":");
  return colon < 0 ? [role, ""] : [role.slice(0, colon + 1), role.slice(colon + 1)];
};

function stateWords(version: VersionOnWire): string {
  const { state } = version;
  if (state === "unreadable") return "this file cannot be read.";
  if (state !== "returned") return "passes the checks.";
  return checksOf(version).some((check) => check.verdict === "return")
    ? "needs a new file from you."
    : "is here already.";
}

/** One file of a draft: its role, what was measured, what each check says, and a new file in its place. */
export function DraftVersion(props: DraftVersionProps) {
  const { deliveryId, title, ending, version, scaleS, uploads, onChanged, isMain } = props;
  const headId = useId();
  const removal = useAct(takeVersionOut);
  const replacement = uploads.running.find((upload) => upload.replaces === version.id);
  const bad = version.state === "returned" || version.state === "unreadable";
  const facts = factsLine(version);
  const name = roleHead(version.versionRole);
  return (
    <li aria-labelledby={headId} className="border-b border-line py-4">
      <div className="grid grid-cols-[1.4375rem_minmax(0,1fr)]">
        <Mark className="mt-[0.22em]" kind={markOfState(version.state)} />
        <div className="min-w-0">
          {version.state === "arrived" ? (
            <VersionProgress version={version} />
          ) : (
            <p className={bad ? "text-magenta" : undefined}>
              <b className="font-strong">{name}</b>: {stateWords(version)}
            </p>
          )}
          <p className="text-small text-ink-soft wrap-anywhere" id={headId}>
            {version.fileName}, {fmt.bytes(version.sizeBytes)}
          </p>
          {version.contour && (
            <div className="mt-2">
              <VersionContour
                ending={ending}
                playable={false}
                scaleS={scaleS}
                title={title}
                version={version}
              />
            </div>
          )}
          {facts && <p className="mt-1 text-small text-ink-soft">{facts}</p>}
          {version.state === "unreadable" && (
            <Problem
              className="mt-2"
              remedy="Export it again and replace it. The other files and all you wrote are kept."
            >
              {version.words}
            </Problem>
          )}
          {version.state === "returned" && !version.words.startsWith("T0") && (
            <p className="mt-2 max-w-measure">{version.words}</p>
          )}
          <VersionChecks version={version} />
          <RoleFields deliveryId={deliveryId} onChanged={onChanged} version={version} />
          {replacement ? (
            <UploadRow upload={replacement} uploads={uploads} />
          ) : (
            <div className="mt-3 flex flex-wrap items-center gap-x-5 gap-y-2">
              <FileButton
                accept={AUDIO_FILES}
                kind={bad ? (isMain ? "main" : "plain") : "quiet"}
                onFiles={(files) => uploads.add(files.slice(0, 1), version.id)}
                wide={bad && isMain}
              >
                {`Replace the ${name.toLowerCase()}`}
              </FileButton>
              <Button
                aria-label={`Take it out: ${version.fileName}`}
                busy={removal.isRunning && "Taking it out"}
                kind="quiet"
                onClick={() => removal.run({ deliveryId, versionId: version.id }, onChanged)}
              >
                Take it out
              </Button>
            </div>
          )}
          <Refusal failure={removal.failure} />
        </div>
      </div>
    </li>
  );
}

const ROLES = versionRoles.map((role) => ({ value: role.id, label: role.label }));

function RoleFields(props: { deliveryId: string; version: VersionOnWire; onChanged: () => void }) {
  const { deliveryId, version, onChanged } = props;
  const change = useAct(changeVersion);
  const [listed, name] = splitRole(version.versionRole);
  const [role, setRole] = useState(listed);
  const [open, setOpen] = useState(name);
  const [isrc, setIsrc] = useState(version.isrc ?? "");
  const isOpen = role.endsWith(":");
  const rule = versionRoles.find((candidate) => candidate.id === role)?.rule;
  const send = (nextRole: string, nextOpen: string) => {
    const versionRole = nextRole.endsWith(":") ? `${nextRole}${nextOpen.trim()}` : nextRole;
    if (nextRole.endsWith(":") && nextOpen.trim() === "") return;
    if (versionRole === version.versionRole && isrc.trim() === (version.isrc ?? "")) return;
    change.run({ deliveryId, versionId: version.id, versionRole, isrc: isrc.trim() || null }, onChanged);
  };
  return (
    <div className="mt-3 grid gap-x-4 gap-y-3 sm:grid-cols-2">
      <SelectField
        error={change.fieldError("versionRole")}
        hint={rule}
        label="What it is"
        onChange={(event) => {
          setRole(event.target.value);
          send(event.target.value, open);
        }}
        options={ROLES}
        value={role}
      />
      {isOpen && (
        <TextField
          label={role === "treated:" ? "Treated how" : "Which layer"}
          onBlur={() => send(role, open)}
          onChange={(event) => setOpen(event.target.value)}
          value={open}
        />
      )}
      <TextField
        autoComplete="off"
        error={change.fieldError("isrc")}
        hint="One for each recording."
        label="ISRC"
        onBlur={() => send(role, open)}
        onChange={(event) => setIsrc(event.target.value)}
        optional
        value={isrc}
      />
      <Refusal className="sm:col-span-2" failure={change.failure} shownAtFields={["versionRole", "isrc"]} />
    </div>
  );
}
