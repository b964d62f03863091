"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { parseAsStringLiteral, useQueryState } from "nuqs";
import { type ReactNode, useEffect, useRef, useState } from "react";
import { FormProvider, useForm, useWatch } from "react-hook-form";
import { Button } from "@/components/ui/button";
import { cx } from "@/components/ui/cx";
import { fmt } from "@/components/ui/format";
import { Mark } from "@/components/ui/mark";
import { Page } from "@/components/ui/page";
import { HeadSentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import { DeclarationsStep } from "./declarations-step";
import { DraftForm, type DraftInput, type DraftOutput, fromDraft, STEPS, type StepId } from "./draft-form";
import { FilesStep } from "./files-step";
import { MusicStep } from "./music-step";
import { SignPanel } from "./sign-panel";
import { TriedContext } from "./tried";
import { useReadAgain } from "./use-delivery";
import { type Keeping, useDraftKeeping } from "./use-draft-keeping";
import { type Missing, useMissing } from "./use-missing";
import { useUploads } from "./use-uploads";
import type { DeliveryOnWire } from "./wire";
import { WritersStep } from "./writers-step";

const FIELDS: Record<StepId, readonly string[]> = {
  files: [],
  music: [
    "title",
    "bpm",
    "musicalKey",
    "genre",
    "moods",
    "instruments",
    "uses",
    "voice",
    "ending",
    "shape",
    "density",
    "description",
    "keywords",
    "iswc",
    "yearRecorded",
    "restrictedTerritories",
  ],
  writers: ["writers", "publishers"],
  declarations: [
    "declaration.authorship",
    "declaration.recordingOwner",
    "declaration.performers",
    "declaration.samples",
  ],
  sign: ["declaration.truth", "declaration.signedName"],
};
/** The steps in the main column; the signature stands on the working table. */
const MAIN_STEPS = STEPS.filter((step) => step.id !== "sign");

/** The draft of a delivery: its steps, what is kept, and the signature. */
export function DraftDesk({ delivery }: { delivery: DeliveryOnWire }) {
  const readAgain = useReadAgain(delivery.id);
  const form = useForm<DraftInput, unknown, DraftOutput>({
    resolver: zodResolver(DraftForm),
    defaultValues: fromDraft(delivery.draft),
    mode: "onTouched",
  });
  const uploads = useUploads(delivery.id, () => void readAgain());
  const { keeping, flush } = useDraftKeeping(form, delivery.id);
  const missing = useMissing(form.control, delivery, uploads.running.length);
  const [step, setStep] = useQueryState(
    "step",
    parseAsStringLiteral(MAIN_STEPS.map((entry) => entry.id)).withDefault("files"),
  );
  const title = useWatch({ control: form.control, name: "title" });
  const ending = useWatch({ control: form.control, name: "ending" }) || null;
  const heading = useRef<HTMLHeadingElement>(null);
  const moved = useRef(false);
  const [tried, setTried] = useState<readonly StepId[]>([]);
  const index = MAIN_STEPS.findIndex((entry) => entry.id === step);
  const next = MAIN_STEPS[index + 1];
  // biome-ignore lint/correctness/useExhaustiveDependencies: the heading is announced whenever the step changes
  useEffect(() => {
    if (moved.current) heading.current?.focus();
  }, [step]);

  const goTo = (target: StepId) => {
    moved.current = true;
    void flush().then(readAgain);
    if (target === "sign") document.getElementById("sign")?.scrollIntoView({ block: "start" });
    else void setStep(target as (typeof MAIN_STEPS)[number]["id"]);
  };
  const goOn = async () => {
    setTried((steps) => [...steps, step]);
    const isWhole = await form.trigger(FIELDS[step] as never, { shouldFocus: true });
    const blocked = step === "writers" && missing.some((item) => item.step === "writers");
    if (isWhole && !blocked) goTo(next?.id ?? "sign");
  };
  const bodies: Record<(typeof MAIN_STEPS)[number]["id"], ReactNode> = {
    files: (
      <FilesStep
        delivery={{ ...delivery, title: title || "Untitled" }}
        ending={ending}
        onChanged={() => void readAgain()}
        uploads={uploads}
      />
    ),
    music: <MusicStep delivery={delivery} />,
    writers: <WritersStep />,
    declarations: <DeclarationsStep delivery={delivery} onPaper={() => void readAgain()} />,
  };
  const needsFile = delivery.versions.some((row) => ["returned", "unreadable"].includes(row.state));
  const filesIsMain = step === "files" && (delivery.versions.length === 0 || needsFile);
  const isReady = missing.every((item) => item.step === "sign");
  return (
    <FormProvider {...form}>
      <Page
        aside={
          <div id="sign">
            <SignPanel
              deliveryId={delivery.id}
              flush={flush}
              goTo={goTo}
              isMain={isReady && !filesIsMain}
              libraryName={delivery.libraryName}
              missing={missing}
              onSigned={readAgain}
            />
          </div>
        }
        asideLabel="Sign and deliver"
      >
        <HeadSentence place={`A draft for ${delivery.libraryName}`}>
          {title ? <Title>{title}</Title> : "An untitled draft"}: {lowerFirst(delivery.words)}
        </HeadSentence>
        <StepList current={step} goTo={goTo} missing={missing} />
        <form
          noValidate
          onSubmit={(event) => {
            event.preventDefault();
            void goOn();
          }}
        >
          <h2
            className="mt-6 mb-3 text-head leading-tight font-strong outline-offset-4"
            ref={heading}
            tabIndex={-1}
          >
            <span className="sr-only">{`Step ${index + 1} of ${STEPS.length}: `}</span>
            {MAIN_STEPS[index]?.words}
          </h2>
          <TriedContext value={tried.includes(step)}>{bodies[step]}</TriedContext>
          <div className="mt-8 flex flex-wrap items-center gap-x-5 gap-y-3 border-t border-ink pt-4">
            <Button kind={isReady || filesIsMain ? "plain" : "main"} type="submit">
              {next ? `Go on to ${lowerFirst(next.words)}` : "Go on to the signature"}
            </Button>
            <KeptWords keeping={keeping} />
          </div>
        </form>
      </Page>
    </FormProvider>
  );
}

const lowerFirst = (words: string) => words.charAt(0).toLowerCase() + words.slice(1);

function StepList(props: { current: StepId; missing: readonly Missing[]; goTo: (step: StepId) => void }) {
  const { current, missing, goTo } = props;
  return (
    <nav aria-label="Steps of this delivery" className="mt-5 border-y border-line py-2.5">
      <ol className="flex flex-wrap gap-x-5 gap-y-1.5">
        {STEPS.map((step) => {
          const isDone = !missing.some((item) => item.step === step.id);
          const isCurrent = step.id === current;
          return (
            <li className="flex items-center gap-2" key={step.id}>
              <Mark kind={isDone ? "done" : isCurrent ? "half" : "open"} />
              <button
                aria-current={isCurrent ? "step" : undefined}
                className={cx("min-h-6", isCurrent ? "font-label" : "link")}
                onClick={() => goTo(step.id)}
                type="button"
              >
                {step.words}
                <span className="sr-only">{isDone ? ", complete" : ", not complete yet"}</span>
              </button>
            </li>
          );
        })}
      </ol>
    </nav>
  );
}

function KeptWords({ keeping }: { keeping: Keeping }) {
  return (
    <div aria-live="polite" className="min-w-0 text-small text-ink-soft">
      {keeping.problem ? (
        <StatusSentence mark="warn">{keeping.problem}</StatusSentence>
      ) : keeping.state === "keeping" ? (
        "Keeping what you wrote."
      ) : keeping.at ? (
        `Kept at ${fmt.timeOfDay(keeping.at)}.`
      ) : (
        "What you write is kept as you go."
      )}
    </div>
  );
}
