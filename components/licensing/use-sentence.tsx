"use client";

import { type ChoiceGroup, ChoiceMenu } from "@/components/search/choice-menu";
import type { RateCard } from "@/lib/licensing/rate-card";
import { classOf, PERPETUAL, type Wish } from "./wish";

interface UseSentenceProps {
  card: RateCard;
  wish: Wish;
  change: (changes: Partial<Wish>) => void;
  countries: readonly { code: string; name: string }[];
}

const COUNTS = Array.from({ length: 13 }, (_, index) => index + 1);
const FEW = Array.from({ length: 7 }, (_, index) => index);
const lower = (words: string) =>
  /^[A-Z][a-z]/.test(words) ? words[0]?.toLowerCase() + words.slice(1) : words;

function Pick(props: {
  name: string;
  words: string;
  chosen: string;
  groups: readonly ChoiceGroup[];
  onPick: (id: string) => void;
}) {
  return (
    <ChoiceMenu
      chosen={[props.chosen]}
      groups={props.groups}
      isOpen={false}
      name={props.name}
      onChange={(ids) => ids[0] !== undefined && props.onPick(ids[0])}
      required
      words={props.words}
    />
  );
}

function territoryWords(card: RateCard, wish: Wish, countries: UseSentenceProps["countries"]): string {
  const [kind, code] = wish.territory.split(":");
  if (kind === "region") return card.regions.find((region) => region.code === code)?.words ?? "a region";
  if (kind === "country") return countries.find((country) => country.code === code)?.name ?? "a country";
  return "the World";
}

/** The use as part of a sentence; its underlined words are the controls. */
export function UseSentence({ card, wish, change, countries }: UseSentenceProps) {
  const row = classOf(card, wish);
  const term = card.terms.find(({ months }) => String(months ?? PERPETUAL) === wish.term);
  const band = row?.tier.kind === "bands" ? row.tier.bands[Number(wish.band)] : undefined;
  return (
    <>
      as{" "}
      <Pick
        chosen={wish.mediaClass}
        groups={[{ options: card.classes.map(({ code, words }) => ({ id: code, words })) }]}
        name="Media"
        onPick={(mediaClass) => change({ mediaClass, band: "0" })}
        words={lower(row?.words ?? "a kind of media")}
      />
      {row?.worldIncluded ? (
        " in the World"
      ) : (
        <>
          {" "}
          in{" "}
          <Pick
            chosen={wish.territory}
            groups={[
              {
                head: "Regions",
                options: [
                  ...card.regions.map(({ code, words }) => ({ id: `region:${code}`, words })),
                  { id: "world", words: "the World" },
                ],
              },
              {
                head: "One country",
                options: countries.map(({ code, name }) => ({ id: `country:${code}`, words: name })),
              },
            ]}
            name="Territory"
            onPick={(territory) => change({ territory })}
            words={territoryWords(card, wish, countries)}
          />
        </>
      )}
      , for{" "}
      <Pick
        chosen={wish.term}
        groups={[
          { options: card.terms.map(({ months, words }) => ({ id: String(months ?? PERPETUAL), words })) },
        ]}
        name="Term"
        onPick={(picked) => change({ term: picked })}
        words={term?.words ?? "a term"}
      />
      {row?.tier.kind === "bands" && (
        <>
          , {row.tier.measure}{" "}
          <Pick
            chosen={wish.band}
            groups={[{ options: row.tier.bands.map(({ words }, index) => ({ id: String(index), words })) }]}
            name={`Size: ${row.tier.measure}`}
            onPick={(picked) => change({ band: picked })}
            words={band?.words ?? "a size"}
          />
        </>
      )}
      {row?.perEpisode && (
        <>
          ,{" "}
          <Pick
            chosen={String(wish.episodes)}
            groups={[
              {
                options: COUNTS.map((count) => ({
                  id: String(count),
                  words: count === 1 ? "one episode" : `${count} episodes`,
                })),
              },
            ]}
            name="Episodes"
            onPick={(count) => change({ episodes: Number(count) })}
            words={wish.episodes === 1 ? "one episode" : `${wish.episodes} episodes`}
          />
        </>
      )}
      {row?.cutdowns && (
        <>
          , with{" "}
          <Pick
            chosen={String(wish.cutdowns)}
            groups={[{ options: FEW.map((count) => ({ id: String(count), words: cutdownWords(count) })) }]}
            name="Extra cutdowns"
            onPick={(count) => change({ cutdowns: Number(count) })}
            words={cutdownWords(wish.cutdowns)}
          />
        </>
      )}
      .
    </>
  );
}

function cutdownWords(count: number): string {
  if (count === 0) return "no cutdowns";
  return count === 1 ? "one extra cutdown" : `${count} extra cutdowns`;
}
