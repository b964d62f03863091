import { db } from "@/db/client";
import { companies, memberships, people } from "@/db/schema/accounts";
import { families, libraries, recordings } from "@/db/schema/catalogue";
import { newId } from "@/lib/kernel/ids";

/** Makers: each writes one fresh thing with its own ids and returns what a test needs of it. */
let counter = Math.floor(Math.random() * 1e6);
const next = () => ++counter;

export async function makePerson(
  values: Partial<typeof people.$inferInsert> = {},
): Promise<{ id: string; name: string; email: string }> {
  const number = next();
  const row = {
    id: newId("per"),
    name: `Person ${number}`,
    email: `person-${number}@test.example`,
    createdAt: new Date(),
    ...values,
  };
  await db().insert(people).values(row);
  return row;
}

export async function makeLibrary(values: Partial<typeof libraries.$inferInsert> = {}): Promise<string> {
  const id = newId("lib");
  const code = String.fromCharCode(...[2, 1, 0].map((power) => 65 + (Math.floor(next() / 26 ** power) % 26)));
  await db()
    .insert(libraries)
    .values({
      id,
      code,
      name: `Library ${code}`,
      place: "Somewhere",
      countryCode: "GB",
      currency: "GBP",
      timeZone: "Europe/London",
      publisherIpi: "99900002152",
      composerPoolBps: 5000,
      character: "made by a test",
      createdAt: new Date(),
      ...values,
    });
  return id;
}

export async function makeCompany(values: Partial<typeof companies.$inferInsert> = {}): Promise<string> {
  const id = newId("com");
  await db()
    .insert(companies)
    .values({
      id,
      name: `Company ${next()}`,
      address: "1 Test Row",
      countryCode: "GB",
      createdAt: new Date(),
      ...values,
    });
  return id;
}

export async function makeMembership(
  values: Omit<typeof memberships.$inferInsert, "id" | "createdAt" | "granted" | "scopeName"> & {
    granted?: string[];
    scopeName?: string;
  },
): Promise<string> {
  const id = newId("mem");
  await db()
    .insert(memberships)
    .values({ granted: [], scopeName: "A library", ...values, id, createdAt: new Date() });
  return id;
}

export async function makeFamily(
  values: Partial<typeof families.$inferInsert> & { libraryId: string },
): Promise<string> {
  const id = values.id ?? newId("fam");
  const number = next();
  await db()
    .insert(families)
    .values({
      number,
      catalogueNumber: `T${number}`,
      title: `Cue ${number}`,
      otherTitles: [],
      state: "listed",
      deal: "exclusive",
      bpm: 90,
      musicalKey: "C minor",
      genre: "chamber",
      voice: "none",
      ending: "button",
      shape: "builds",
      density: "sparse",
      description: "A cue that was made by a test, with nothing in it that anybody could hear or want.",
      keywords: [],
      sections: [],
      restrictedTerritories: [],
      refusedUses: [],
      searchText: "",
      createdAt: new Date(),
      ...values,
      id,
    });
  return id;
}

export async function makeRecording(
  values: Partial<typeof recordings.$inferInsert> & { familyId: string; libraryId: string },
): Promise<string> {
  const id = values.id ?? newId("rec");
  await db()
    .insert(recordings)
    .values({
      versionRole: "full",
      position: 0,
      state: "listed",
      ending: "button",
      fileKey: `file-${id}`,
      fileName: "made-by-a-test.wav",
      fileSha256: "0".repeat(64),
      sampleRateHz: 48_000,
      bitDepth: 24,
      channels: 2,
      durationS: 120,
      createdAt: new Date(),
      ...values,
      id,
    });
  return id;
}
