import { lastUseAt } from "@/lib/kernel/deadlines";
import { formatIswc } from "@/lib/kernel/identifiers";
import type { JsonValue } from "./canonical-json";
import { type ConfidentialField, commitment, type Disclosed, newSalt } from "./confidential";
import {
  LicenceRecord,
  LicenceRecordInput,
  PERFORMANCE_NOT_INCLUDED,
  RECORD_FORMAT,
  SCREENING_CAUTION,
} from "./schema";
import { scopeWords } from "./scope-words";
import { sha256Hex } from "./signing-key";

export interface BuiltRecord {
  record: LicenceRecord;
  disclosed: Required<Disclosed>;
}

/** Lines ready to paste into a cue sheet, one a version; they carry no price. */
function cueSheetLines({ cue, shares, number }: LicenceRecordInput): string[] {
  const person = (row: { name: string; role: string; ipi: string | null; share: string }) =>
    `${row.name} (${[row.role, row.ipi, `${row.share} %`].filter(Boolean).join(", ")})`;
  return cue.versions.map((version) =>
    [
      `${cue.title} / ${version.role}`,
      version.isrc === null ? null : `ISRC ${version.isrc}`,
      cue.iswc === null ? null : `ISWC ${formatIswc(cue.iswc)}`,
      `Writers: ${shares.writers.map(person).join("; ")}`,
      shares.publishers.length === 0
        ? "Unpublished"
        : `Publishers: ${shares.publishers.map((row) => person({ ...row, role: row.role })).join("; ")}`,
      `${cue.library} ${cue.catalogueNumber}`,
      number,
    ]
      .filter(Boolean)
      .join(" | "),
  );
}

/**
 * The unsigned record of one licence, and beside it the values of its confidential fields with fresh salts.
 * Whatever follows from other fields is derived here: last use, the scope in words, cue-sheet lines, the hash of
 * the terms. Throws ZodError if the input is not complete and consistent.
 */
export function buildRecord(input: LicenceRecordInput, salt: () => string = newSalt): BuiltRecord {
  const given = LicenceRecordInput.parse(input);
  const disclosed: Disclosed = {};
  const conceal = (field: ConfidentialField, value: JsonValue) => {
    disclosed[field] = { salt: salt(), value };
    return commitment(field, disclosed[field]);
  };
  const { statusAtIssue, performanceIncluded, licensee, production, scope, acceptance, terms, ...rest } =
    given;
  const { months, startsOn, zone } = scope.term;
  const last = months === null ? null : lastUseAt(startsOn, months, zone).toISOString();
  const facts = { ...scope, term: { ...scope.term, lastUseAt: last } };
  const record = LicenceRecord.parse({
    ...rest,
    format: RECORD_FORMAT,
    status: {
      atIssue: statusAtIssue,
      history: "Later changes are dated lines beside this record; its own text never changes.",
    },
    licensee: {
      name: conceal("licensee.name", licensee.name),
      endClient: conceal("licensee.endClient", licensee.endClient),
      address: conceal("licensee.address", licensee.address),
    },
    production: {
      type: production.type,
      title: conceal("production.title", production.title),
      parts: conceal("production.parts", production.parts),
      references: conceal("production.references", production.references),
    },
    scope: { ...facts, words: scopeWords(facts) },
    notIncluded: [...(performanceIncluded ? [] : [PERFORMANCE_NOT_INCLUDED]), ...given.notIncluded],
    fee: { details: conceal("fee.details", given.fee) },
    terms: { ...terms, sha256: sha256Hex(terms.text) },
    screening: { ...given.screening, caution: SCREENING_CAUTION },
    cueSheetLines: cueSheetLines(given),
    acceptance: { ...acceptance, person: conceal("acceptance.person", acceptance.person) },
  });
  return { record, disclosed: disclosed as Required<Disclosed> };
}
