import { inArray } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { licenceRecords } from "@/db/schema/licensing";
import { companyById } from "@/lib/accounts";
import { familyById, libraryById, recordingsOfFamily } from "@/lib/catalogue";
import { startOfDay } from "@/lib/kernel/calendar";
import { assert, Conflict, Invalid, NotFound } from "@/lib/kernel/errors";
import { licenceNumber, parseLicenceNumber } from "@/lib/kernel/licence-number";
import { decimalOf, money, parseMoney } from "@/lib/kernel/money";
import { command } from "@/lib/kernel/verb";
import { productionById } from "@/lib/productions";
import { cardAt } from "../cards/set-rate-card";
import { notIncludedWith } from "../media";
import { raiseSeries, SERIES } from "../orders/number-series";
import { ImportLicence } from "../schemas";
import { catalogueFacts } from "./facts";
import { addLicenceStatus } from "./record-log";
import { scopeOfUse } from "./scope-of-use";
import { signIntoLog } from "./sign-into-log";

/** "LR-2026-0103" or "LR-2026-0103-C": the number as the library issued it, in full. */
function numberOf(text: string): { number: string; year: number; serial: number } {
  const bare = /^LR-(\d{4})-(\d{4,9})$/.exec(text.trim().toUpperCase());
  const parsed = bare ? null : parseLicenceNumber(text);
  if (parsed && !parsed.ok) throw new Invalid(parsed.message, { number: parsed.message });
  const [, year = "", serial = ""] = bare ?? /^LR-(\d{4})-(\d+)-/.exec(parsed?.ok ? parsed.number : "") ?? [];
  return {
    number: licenceNumber(Number(year), Number(serial)),
    year: Number(year),
    serial: Number(serial),
  };
}

async function checkParties(
  tx: Tx,
  input: { companyId: string | null; productionId: string | null },
): Promise<void> {
  if (input.companyId && !(await companyById(tx, input.companyId)))
    throw new Invalid("There is no such company.");
  if (!input.productionId) return;
  const production = await productionById(tx, input.productionId);
  if (!production || production.companyId !== input.companyId)
    throw new Invalid("The production is not the licensee's.");
}

/**
 * LICENSING-9: a licence that its library issued outside this service, signed here as brought in: its number is kept, its price
 * shown, and no money of it is in the journal. Numbering goes on above it.
 */
export const importLicence = command({
  name: "licensing.importLicence",
  who: ["owner", "system"],
  input: ImportLicence,
  authorise: async ({ tx, actor, input }) => {
    const libraryId = actor.kind === "owner" ? actor.libraryId : input.libraryId;
    const family = await familyById(tx, input.familyId);
    if (!libraryId || (input.libraryId ?? libraryId) !== libraryId || family?.libraryId !== libraryId)
      throw new NotFound();
    const library = await libraryById(tx, libraryId);
    if (!library) throw new NotFound();
    return { family, library };
  },
  run: async ({ tx, input, subject: { family, library }, now }) => {
    const { number, year, serial } = numberOf(input.number);
    await checkParties(tx, input);
    // The series row serialises two imports of one number.
    await raiseSeries(tx, SERIES.licence(year), serial);
    const taken = await tx
      .select({ number: licenceRecords.number })
      .from(licenceRecords)
      .where(inArray(licenceRecords.number, [number]));
    if (taken.length > 0) throw new Conflict(`${number} has been brought in or issued already.`);
    const card = await cardAt(tx, library.id, now);
    if (!card) throw new Invalid(`${library.name} needs a rate card first: it names the media and regions.`);
    const net = parseMoney(input.net, library.currency);
    if (!net.ok) throw new Invalid(net.message, { net: net.message });
    const at = startOfDay(input.licensedOn, library.timeZone);
    const recordings = (await recordingsOfFamily(tx, family.id)).filter(({ state }) => state !== "refused");
    assert(recordings.length > 0, `the family ${family.id} has recordings`);
    const { facts } = await catalogueFacts(tx, {
      family,
      recordingIds: recordings.map(({ id }) => id),
      at: now,
    });
    const amount = decimalOf(net.money);
    const { record, proofCode } = await signIntoLog(
      tx,
      {
        ...facts,
        number,
        licensee: input.licensee,
        production: { ...input.production, references: { internal: null, isan: null, eidr: null } },
        scope: scopeOfUse({
          card: card.card,
          use: input.use,
          startsOn: input.licensedOn,
          zone: library.timeZone,
          refusedUses: family.refusedUses,
          creditLine: `“${family.title}”, ${library.name}`,
          voice: family.voice,
        }),
        notIncluded: notIncludedWith(input.use.mediaClass),
        fee: {
          net: amount,
          tax: decimalOf(money(0n, library.currency)),
          taxWords: "Tax as invoiced by the library outside this service",
          gross: amount,
          currency: library.currency,
          basis: "As the library stated it; not priced here",
          cardVersion: null,
          paymentReference: null,
          invoiceNumber: null,
        },
        acceptance: {
          person: { name: input.acceptedBy ?? input.licensee.name, role: "as the library stated" },
          authorityStatement: `Accepted with ${library.name} outside this service.`,
          acceptedAt: at.toISOString(),
          method: "brought in",
          addressSha256: null,
        },
      },
      {
        origin: "brought in",
        orderLineId: null,
        libraryId: library.id,
        companyId: input.companyId,
        productionId: input.productionId,
        familyId: family.id,
      },
      now,
    );
    await addLicenceStatus(tx, {
      number,
      kind: "in force",
      words: `Issued by ${library.name} outside this service; brought in and signed later.`,
      at,
      now,
    });
    return { number: record.number, proofCode };
  },
  audit: ({ subject, result }) => ({
    subject: result.number,
    libraryId: subject.library.id,
    detail: { origin: "brought in" },
  }),
});
