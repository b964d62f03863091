import "@/tests/support/database";
import { describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { confirmedName, confirmName, findWriter, listRoster } from "@/lib/accounts";
import type { Actor } from "@/lib/kernel/actor";
import { system } from "@/lib/kernel/actor";
import { makeLibrary, makeMembership, makePerson } from "@/tests/support/make";
import { ownerOf } from "./support";

/** Invented numbers of the demonstration; their check digits follow CISAC's published rule. */
const [IPI_A, IPI_C] = ["99900000158", "99900000354"];

async function libraryWithWriter() {
  const libraryId = await makeLibrary();
  const writer = await makePerson({ name: "Ailsa Trevarrick-Moe" });
  await makeMembership({ personId: writer.id, role: "composer", libraryId });
  return { libraryId, writer, owner: await ownerOf(libraryId) };
}

const names = { legalName: "Ailsa Trevarrick-Moe", creditName: "Ailsa Trevarrick" };

describe("the roster", () => {
  test("holds a writer's names and IPI as the library has confirmed them", async () => {
    const { libraryId, writer, owner } = await libraryWithWriter();
    expect(await confirmedName(db(), libraryId, writer.id)).toBeNull();
    await confirmName(owner, { personId: writer.id, ...names, ipi: "999.00.000.158", society: "invented" });
    expect(await confirmedName(db(), libraryId, writer.id)).toMatchObject({
      ...names,
      ipi: IPI_A,
      society: "invented",
    });
    expect(await listRoster(owner, {})).toMatchObject({
      writers: [{ personId: writer.id, email: writer.email, confirmed: { ipi: IPI_A } }],
    });
  });

  test("refuses an IPI with wrong check digits, says so at the field and suggests the right ones", async () => {
    const { libraryId, writer, owner } = await libraryWithWriter();
    await expect(
      confirmName(owner, { personId: writer.id, ...names, ipi: "99900000159" }),
    ).rejects.toMatchObject({
      code: "invalid",
      fields: { ipi: `The check digits do not match; did you mean ${IPI_A}?` },
    });
    expect(await confirmedName(db(), libraryId, writer.id)).toBeNull();
  });

  test("takes a writer without an IPI, and a later correction", async () => {
    const { libraryId, writer, owner } = await libraryWithWriter();
    await confirmName(owner, { personId: writer.id, ...names, ipi: "" });
    expect(await confirmedName(db(), libraryId, writer.id)).toMatchObject({ ipi: null });
    await confirmName(owner, { personId: writer.id, ...names, creditName: "A. Trevarrick-Moe", ipi: IPI_A });
    expect(await confirmedName(db(), libraryId, writer.id)).toMatchObject({
      creditName: "A. Trevarrick-Moe",
      ipi: IPI_A,
    });
  });

  test("confirms one IPI for one writer, even when two are confirmed at once", async () => {
    const { libraryId, writer, owner } = await libraryWithWriter();
    const second = await makePerson();
    await makeMembership({ personId: second.id, role: "composer", libraryId });
    const confirm = (personId: string) => confirmName(owner, { personId, ...names, ipi: IPI_C });
    const answers = await Promise.allSettled([confirm(writer.id), confirm(second.id)]);
    expect(answers.filter((answer) => answer.status === "fulfilled")).toHaveLength(1);
    expect(answers.find((answer) => answer.status === "rejected")).toMatchObject({
      reason: { code: "conflict" },
    });
    const confirmed = [
      await confirmedName(db(), libraryId, writer.id),
      await confirmedName(db(), libraryId, second.id),
    ];
    expect(confirmed.filter((one) => one?.ipi === IPI_C)).toHaveLength(1);
  });

  test("is each library's own: the same writer is confirmed by each, and nobody else's writer by any", async () => {
    const { libraryId, writer, owner } = await libraryWithWriter();
    const other = await libraryWithWriter();
    await expect(confirmName(other.owner, { personId: writer.id, ...names })).rejects.toMatchObject({
      code: "not_found",
    });
    await expect(
      confirmName(other.owner, { personId: writer.id, libraryId, ...names }),
    ).rejects.toMatchObject({ code: "not_found" });
    await makeMembership({ personId: writer.id, role: "composer", libraryId: other.libraryId });
    await confirmName(other.owner, { personId: writer.id, ...names, ipi: IPI_A });
    expect(await confirmedName(db(), libraryId, writer.id)).toBeNull();
    await confirmName(owner, { personId: writer.id, ...names, ipi: IPI_A });
    await expect(confirmName(system("tests"), { personId: writer.id, ...names })).rejects.toMatchObject({
      code: "not_found",
    });
  });

  test("shows addresses to the owner and staff only", async () => {
    const { libraryId } = await libraryWithWriter();
    const person = await makePerson();
    const moderator: Actor = { kind: "moderator", libraryId, personId: person.id, name: person.name };
    expect((await listRoster(moderator, {})).writers.map((one) => one.email)).toEqual([null]);
    await expect(listRoster({ ...moderator, libraryId: null }, {})).rejects.toMatchObject({
      code: "not_found",
    });
  });
});

describe("finding a co-writer", () => {
  test("by exact IPI or exact address, on the roster of one's own library only", async () => {
    const { libraryId, writer, owner } = await libraryWithWriter();
    const composer: Actor = { kind: "composer", libraryId, personId: writer.id, name: writer.name };
    expect(await findWriter(composer, { libraryId, email: writer.email })).toEqual({
      personId: writer.id,
      name: writer.name,
      confirmed: null,
    });
    expect(await findWriter(composer, { libraryId, ipi: IPI_A })).toBeNull();
    await confirmName(owner, { personId: writer.id, ...names, ipi: IPI_A });
    expect(await findWriter(composer, { libraryId, ipi: "999 0000 0158" })).toMatchObject({
      personId: writer.id,
      confirmed: { creditName: "Ailsa Trevarrick", ipi: IPI_A },
    });
    expect(await findWriter(composer, { libraryId, ipi: "99900000159" })).toBeNull();
    expect(await findWriter(composer, { libraryId, email: (await makePerson()).email })).toBeNull();
    await expect(
      findWriter(composer, { libraryId: (await libraryWithWriter()).libraryId, ipi: IPI_A }),
    ).rejects.toMatchObject({ code: "not_found" });
    await expect(findWriter(composer, { libraryId })).rejects.toMatchObject({ code: "invalid" });
  });
});
