import { type SQL, sql } from "drizzle-orm";
import type { Reader } from "@/db/client";
import type { Brief } from "../schemas";
import { WORLD } from "../schemas";

export interface Candidate {
  familyId: string;
  relevance: number;
  searchText: string;
}

/** Only so many are weighed exactly; they are the ones that share most with the brief. */
const WEIGHED_MAX = 400;

/** Words of a text without accents, as the database's own collation compares them. */
export function textWords(text: string): string[] {
  const folded = text.toLowerCase().normalize("NFD").replace(/\p{M}/gu, "");
  return [...new Set(folded.match(/[\p{L}\p{N}]+/gu) ?? [])].filter((word) => word.length > 1);
}

/** A word without its ending, where enough of it is left: "sneaking" and "sneaky" are both "sneak". */
export function stemOf(word: string): string {
  const stem = word.replace(/(ings?|ness|ly|ies|ed|es|y|s)$/u, "");
  return stem.length >= 4 ? stem : word;
}

/** Whether a word of a text is the stem or goes on from it; short words must be the same. */
export const isBeginning = (stem: string, word: string) =>
  stem.length > 3 ? word.startsWith(stem) : word === stem;

const booleanQuery = (words: readonly string[]) =>
  words
    .map(stemOf)
    .map((stem) => (stem.length > 3 ? `${stem}*` : stem))
    .join(" ");

/** What is on sale: listed, and nothing holds it. */
export const ON_SALE: SQL = sql`f.state = 'listed' and not exists (
  select 1 from holds h where h.family_id = f.id and h.ended_at is null)`;

/** Families that meet the brief's conditions, those that share most of its words first. */
export async function candidates(reader: Reader, brief: Brief): Promise<Candidate[]> {
  const words = textWords(brief.text);
  const relevance = words.length
    ? sql`match(f.search_text) against (${booleanQuery(words)} in boolean mode)`
    : sql`0`;
  const code = brief.text.toUpperCase().replace(/[^A-Z0-9]/g, "");
  const exact = words.length
    ? sql`(f.title = ${brief.text} or f.catalogue_number = ${code} or exists (
        select 1 from recordings i where i.family_id = f.id and i.isrc = ${code}))`
    : sql`0`;
  const asked = askedTerms(brief);
  const shared = asked.length
    ? sql`(select count(*) from family_terms t where t.family_id = f.id and (${sql.join(asked, sql` or `)}))`
    : sql`0`;
  const conditions = [ON_SALE, ...exclusions(brief), ...limits(brief)];
  const [rows] = (await reader.execute(sql`
    select f.id as familyId, f.search_text as searchText, ${relevance} + 100 * ${exact} as relevance, ${shared} as shared
    from families f join libraries l on l.id = f.library_id
    where ${sql.join(conditions, sql` and `)}
    order by 2 * shared + relevance desc, f.listed_at desc, f.id
    limit ${WEIGHED_MAX}`)) as unknown as [{ familyId: string; searchText: string; relevance: number }[]];
  return rows.map((row) => ({ ...row, relevance: Number(row.relevance) }));
}

function askedTerms(brief: Brief): SQL[] {
  const kinds = [
    ["mood", brief.moods],
    ["use", brief.uses],
    ["instrument", brief.lead],
    ["genre", brief.genres],
  ] as const;
  return kinds
    .filter(([, terms]) => terms.length > 0)
    .map(
      ([kind, terms]) =>
        sql`(t.kind = ${kind} and t.term in (${sql.join(
          terms.map((term) => sql`${term}`),
          sql`, `,
        )}))`,
    );
}

function exclusions(brief: Brief): SQL[] {
  return brief.not.map((excluded) => {
    const colon = excluded.indexOf(":");
    const [kind, term] = [excluded.slice(0, colon), excluded.slice(colon + 1)];
    // Ids are ASCII, and comparing them with anything else is an error of the database.
    if (kind !== "word" && !/^[a-z-]+$/.test(term)) return sql`1`;
    if (kind === "voice") return sql`f.voice <> ${term}`;
    if (kind === "word") {
      const words = textWords(term);
      return words.length
        ? sql`not (match(f.search_text) against (${booleanQuery(words)} in boolean mode))`
        : sql`1`;
    }
    return sql`not exists (select 1 from family_terms x where x.family_id = f.id and x.kind = ${kind} and x.term = ${term})`;
  });
}

/** One-stop: the whole publisher side is the library's and none of the countries asked for is held back. */
function limits(brief: Brief): SQL[] {
  const library = brief.library ? [sql`l.code = ${brief.library}`] : [];
  if (brief.oneStop.length === 0) return library;
  const newest = sql`(select v.id from split_versions v where v.family_id = f.id order by v.version desc limit 1)`;
  const controlled = sql`(select coalesce(sum(s.share_bps), 0) from split_shares s
    where s.split_version_id = ${newest} and s.side = 'publisher' and s.ipi = l.publisher_ipi) = 10000`;
  const free = brief.oneStop.map((country) =>
    country === WORLD
      ? sql`json_length(f.restricted_territories) = 0`
      : sql`not json_contains(f.restricted_territories, ${JSON.stringify(country)})`,
  );
  return [...library, controlled, ...free];
}

export async function countOnSale(reader: Reader): Promise<number> {
  const [rows] = (await reader.execute(
    sql`select count(*) as cues from families f where ${ON_SALE}`,
  )) as unknown as [{ cues: number }[]];
  return Number(rows[0]?.cues ?? 0);
}
