import type { FamilyDescription } from "./schemas";
import { genres, instruments, moods, uses } from "./vocabularies";

const labels = new Map<string, string>(
  [...genres, ...moods, ...instruments, ...uses].map((term) => [term.id, term.label]),
);

/** Everything that full-text search reads of a family, in one column. */
export function searchTextOf(description: FamilyDescription): string {
  const terms = [
    description.genre,
    ...description.moreGenres,
    ...description.moods,
    ...description.instruments,
    ...description.uses,
  ];
  return [
    description.title,
    ...description.otherTitles,
    description.description,
    ...description.keywords,
    ...terms.map((term) => labels.get(term) ?? term),
  ].join(" · ");
}
