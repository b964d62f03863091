"use client";

import { keepPreviousData, useInfiniteQuery } from "@tanstack/react-query";
import Form from "next/form";
import { useQueryStates } from "nuqs";
import { useMemo, useState } from "react";
import { listScaleS } from "@/components/contour/contour-strip";
import { usePlayer } from "@/components/player/use-player";
import { Button } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { useKeys } from "@/components/ui/keys";
import { Problem } from "@/components/ui/problem";
import { notify } from "@/components/ui/toaster";
import type { Brief } from "@/lib/catalogue/schemas";
import { briefOf, briefParams, isEmptyBrief, valuesOf } from "./brief-params";
import { briefQuery } from "./brief-query";
import { BriefSentence, FurtherWords } from "./brief-sentence";
import { CueRow } from "./cue-row";
import type { FoundPage } from "./find-types";
import { trackOf } from "./tracks";

export interface FindCuesProps {
  first: FoundPage;
  /** The brief that `first` answers, as its address. */
  firstQuery: string;
  libraries: readonly { code: string; name: string }[];
  production: { id: string; words: string; families: readonly string[] } | null;
  shortlist?:
    | ((input: { productionId: string; recordingId: string }) => Promise<{ ok: boolean; message?: string }>)
    | undefined;
}

const POLL_MS = 60_000;

async function readPage(query: string, productionId: string | null, page: number): Promise<FoundPage> {
  const search = new URLSearchParams(query);
  if (productionId) search.set("production", productionId);
  if (page > 0) search.set("page", String(page));
  const answer = await fetch(`/api/cues?${search}`);
  if (!answer.ok) throw new Error("The list could not be read.");
  return (await answer.json()) as FoundPage;
}

export function FindCues({ first, firstQuery, libraries, production, shortlist }: FindCuesProps) {
  const [values, setValues] = useQueryStates(briefParams, { history: "push" });
  const brief = useMemo(() => briefOf(values), [values]);
  const change = (changes: Partial<Brief>) => setValues(valuesOf({ ...brief, ...changes }));
  const query = briefQuery(brief);
  const list = useInfiniteQuery({
    queryKey: ["cues", query, production?.id ?? null],
    queryFn: ({ pageParam }) => readPage(query, production?.id ?? null, pageParam),
    initialPageParam: 0,
    getNextPageParam: (last) => ((last.page + 1) * last.pageSize < last.total ? last.page + 1 : undefined),
    ...(query === firstQuery ? { initialData: { pages: [first], pageParams: [0] } } : {}),
    placeholderData: keepPreviousData,
    refetchInterval: POLL_MS,
  });
  const pages = list.data?.pages ?? [];
  const cues = pages.flatMap((page) => page.cues);
  const newest = pages.at(-1) ?? first;
  const scaleS = listScaleS(cues.map((cue) => cue.durationS));
  const keep = useShortlisting(production, shortlist);
  useListKeys(cues, keep.add);
  const isEmpty = isEmptyBrief(brief);
  return (
    <>
      <BriefSentence brief={brief} change={change} libraries={libraries} />
      <div className="mt-2">
        <FurtherWords brief={brief} change={change} isSet={false} libraries={libraries} />
      </div>
      <SayIt brief={brief} production={production?.id ?? null} />
      <div className="mt-5 mb-2.5 flex flex-wrap items-baseline justify-between gap-x-8 gap-y-1">
        <p aria-live="polite" className="text-lead">
          {foundWords(newest, isEmpty)}{" "}
          {!isEmpty && (
            <Button className="ml-1 text-small" kind="quiet" onClick={() => setValues(null)}>
              Begin again
            </Button>
          )}
        </p>
        <p className="text-small text-ink-soft">
          {isEmpty ? "Newest first" : "Closest first"}; no place is paid for. Press a strip to hear it.
        </p>
      </div>
      {list.isError && (
        <Problem live remedy="What was found before is still here; it is tried again in a minute.">
          The list could not be read just now.
        </Problem>
      )}
      {cues.length === 0 ? (
        <NothingFound brief={brief} change={change} onSale={newest.onSale} />
      ) : (
        <ul aria-label="Cues found" className={list.isPlaceholderData ? "opacity-60" : undefined}>
          {cues.map((cue) => (
            <CueRow
              cue={cue}
              isShortlisted={keep.has(cue.familyId)}
              key={cue.familyId}
              priceFor={production?.words ?? null}
              scaleS={scaleS}
              shortlist={
                production && shortlist
                  ? (recordingId, title) => keep.add(cue.familyId, recordingId, title)
                  : undefined
              }
            />
          ))}
        </ul>
      )}
      {list.hasNextPage && (
        <Button
          busy={list.isFetchingNextPage && "Reading more"}
          className="mt-4"
          onClick={() => list.fetchNextPage()}
        >
          Show {Math.min(newest.pageSize, newest.total - cues.length)} more of {newest.total}
        </Button>
      )}
    </>
  );
}

/** Typed words are read on the server and become part of the sentence; this works without scripts too. */
function SayIt({ brief, production }: { brief: Brief; production: string | null }) {
  const standing = [...new URLSearchParams(briefQuery(brief))];
  return (
    <Form action="/find" className="mt-3 flex max-w-head flex-wrap items-end gap-x-3 gap-y-2">
      {standing.map(([name, value]) => (
        <input key={name} name={name} type="hidden" value={value} />
      ))}
      {production && <input name="production" type="hidden" value={production} />}
      <label className="min-w-0 grow basis-72 text-small text-ink-soft" htmlFor="say">
        Say it in your own words, or say what to add
        <input
          autoComplete="off"
          className="mt-0.5 block min-h-9 w-full rounded-plain border border-ink-soft bg-page px-3 text-body text-ink placeholder:text-ink-soft"
          id="say"
          key={briefQuery(brief)}
          maxLength={400}
          name="say"
          placeholder="fragile piano under narration, no sentiment, opens late, 45 s"
          type="text"
        />
      </label>
      <Button className="min-h-9" size="small" type="submit">
        Find
      </Button>
    </Form>
  );
}

function foundWords({ total, fitting, onSale, asked }: FoundPage, isEmpty: boolean): string {
  if (isEmpty || asked === 0)
    return total === onSale
      ? `${fmt.count(onSale, "cue is", "cues are")} on sale.`
      : `${capital(fmt.countWord(total, "cue", "cues"))} of the ${onSale} on sale.`;
  const misses = total - fitting;
  const first =
    fitting === 0
      ? `None of the ${onSale} cues on sale fits every word`
      : `${capital(fmt.countWord(fitting, "", "").trim())} of the ${onSale} cues on sale ${fitting === 1 ? "fits" : "fit"} every word`;
  if (misses === 0) return `${first}.`;
  return `${first}; ${fitting === 0 ? "" : ""}${fmt.countWord(misses, "", "").trim()}${fitting === 0 ? "" : " more"} ${misses === 1 ? "says" : "say"} where ${misses === 1 ? "it misses" : "they miss"}.`;
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);

function NothingFound({
  brief,
  change,
  onSale,
}: {
  brief: Brief;
  change: (changes: Partial<Brief>) => void;
  onSale: number;
}) {
  if (onSale === 0) return <Empty>Cues will be here as soon as the first library has listed one.</Empty>;
  const hasLimits = brief.not.length > 0 || brief.library !== null || brief.oneStop.length > 0;
  return (
    <Empty
      action={
        hasLimits ? (
          <Button onClick={() => change({ not: [], library: null, oneStop: [] })}>
            Take out what rules cues out
          </Button>
        ) : undefined
      }
    >
      Nothing on sale is near enough to this. Leave one of the words open, or say it in other words.
    </Empty>
  );
}

/** Shortlisting, with what has just been added known before the page has been read again. */
function useShortlisting(production: FindCuesProps["production"], shortlist: FindCuesProps["shortlist"]) {
  const [added, setAdded] = useState<readonly string[]>([]);
  const add = async (familyId: string, recordingId: string, title: string) => {
    if (!production || !shortlist) return;
    const answer = await shortlist({ productionId: production.id, recordingId });
    if (answer.ok) {
      setAdded((before) => [...before, `${production.id}:${familyId}`]);
      notify({ title: `${title} is on the shortlist.` });
    } else notify({ title: answer.message ?? "It could not be put on the shortlist." });
  };
  const has = (familyId: string) =>
    production !== null &&
    (production.families.includes(familyId) || added.includes(`${production.id}:${familyId}`));
  return { add, has };
}

/** Keys of the list: the next cue, the one before, where it opens, on to the shortlist. */
function useListKeys(
  cues: FoundPage["cues"],
  add: (familyId: string, recordingId: string, title: string) => void,
): void {
  const { state, load, seek } = usePlayer();
  const at = cues.findIndex((cue) => cue.versions.some((version) => version.recordingId === state.track?.id));
  const go = (step: number) => {
    const cue = cues[at < 0 ? (step > 0 ? 0 : cues.length - 1) : at + step];
    const head = cue?.versions[0];
    if (!cue || !head?.canBeHeard) return;
    load(trackOf(cue, head, cue.contour), 0);
    document.querySelector(`[data-cue="${cue.number}"]`)?.scrollIntoView({ block: "nearest" });
  };
  const current = cues[at];
  useKeys("Finding", [
    { key: "j", does: "plays the next cue", run: () => go(1) },
    { key: "k", does: "plays the cue before", run: () => go(-1) },
    {
      key: "o",
      does: "goes to where it opens",
      run: () => current?.opensS !== undefined && current?.opensS !== null && seek(current.opensS),
    },
    {
      key: "s",
      does: "puts the playing version on the shortlist",
      run: () => current && state.track && add(current.familyId, state.track.id, current.title),
    },
  ]);
}
