"use client";

import Form from "next/form";
import { useQueryStates } from "nuqs";
import { useMemo } from "react";
import { Button } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import type { Brief } from "@/lib/catalogue/schemas";
import { briefOf, briefParams, isEmptyBrief, valuesOf } from "./brief-params";
import { briefQuery } from "./brief-query";
import { BriefSentence, FurtherWords } from "./brief-sentence";
import { CueList, type ListProduction, type PriceAction, type ShortlistAction } from "./cue-list";
import type { FoundPage } from "./find-types";

export interface FindCuesProps {
  first: FoundPage;
  /** The brief that `first` answers, as its address. */
  firstQuery: string;
  libraries: readonly { code: string; name: string }[];
  production: ListProduction | null;
  shortlist?: ShortlistAction | undefined;
  priceProduction?: PriceAction | undefined;
}

/** The brief and what it finds. */
export function FindCues(props: FindCuesProps) {
  const { first, firstQuery, libraries, production, shortlist, priceProduction } = props;
  const [values, setValues] = useQueryStates(briefParams, { history: "push" });
  const brief = useMemo(() => briefOf(values), [values]);
  const change = (changes: Partial<Brief>) => setValues(valuesOf({ ...brief, ...changes }));
  const isEmpty = isEmptyBrief(brief);
  return (
    <>
      <BriefSentence brief={brief} change={change} libraries={libraries} />
      <div className="mt-2">
        <FurtherWords brief={brief} change={change} isSet={false} libraries={libraries} />
      </div>
      <SayIt brief={brief} production={production?.id ?? null} />
      <CueList
        brief={brief}
        empty={(onSale) => <NothingFound brief={brief} change={change} onSale={onSale} />}
        first={first}
        firstQuery={firstQuery}
        head={(page) => (
          <div className="mt-5 mb-2.5 flex flex-wrap items-baseline justify-between gap-x-8 gap-y-1">
            <p aria-live="polite" className="text-lead">
              {foundWords(page, isEmpty)}{" "}
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
        )}
        priceProduction={priceProduction}
        production={production}
        shortlist={shortlist}
      />
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
