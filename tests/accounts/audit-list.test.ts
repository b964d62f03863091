import "@/tests/support/database";
import { describe, expect, test } from "vitest";
import { auditList, confirmName, invitePerson } from "@/lib/accounts";
import { verbInWords } from "@/lib/accounts/audit-list";
import { type Actor, system } from "@/lib/kernel/actor";
import { makeLibrary, makeMembership, makePerson } from "@/tests/support/make";
import { adminActor, ownerOf } from "./support";

const names = { legalName: "Ailsa Trevarrick-Moe", creditName: "Ailsa Trevarrick" };

describe("the audit list", () => {
  test("shows an owner what concerns the library, and nothing of another", async () => {
    const [libraryId, otherId] = [await makeLibrary(), await makeLibrary()];
    const owner = await ownerOf(libraryId);
    const writer = await makePerson();
    for (const id of [libraryId, otherId])
      await makeMembership({ personId: writer.id, role: "composer", libraryId: id });
    await confirmName(owner, { personId: writer.id, ...names });
    await confirmName(system("a nightly job"), { personId: writer.id, libraryId: otherId, ...names });
    const { lines, next } = await auditList(owner, {});
    expect(next).toBeNull();
    expect(lines).toMatchObject([
      { who: owner.name, role: "owner", did: "accounts: confirm name", subject: writer.id },
    ]);
    expect((await auditList(await ownerOf(otherId), {})).lines).toMatchObject([
      { who: "Sedgewren", role: "system" },
    ]);
  });

  test("names an admin to a library by role only, and to another admin by name", async () => {
    const libraryId = await makeLibrary();
    const admin = await adminActor();
    const { invitationId } = await invitePerson(admin, {
      email: "seen@test.example",
      name: "Seen",
      role: "owner",
      libraryId,
      scopeName: "A Library",
    });
    expect((await auditList(await ownerOf(libraryId), {})).lines).toMatchObject([{ who: "an admin" }]);
    expect((await auditList(admin, { subject: invitationId })).lines).toMatchObject([{ who: admin.name }]);
  });

  test("gives fifty rows a page, each once, in order", async () => {
    const libraryId = await makeLibrary();
    const owner = await ownerOf(libraryId);
    const writer = await makePerson();
    await makeMembership({ personId: writer.id, role: "composer", libraryId });
    for (let index = 0; index < 61; index++) await confirmName(owner, { personId: writer.id, ...names });
    const first = await auditList(owner, {});
    const second = await auditList(owner, { after: first.next });
    expect([first.lines.length, second.lines.length, second.next]).toEqual([50, 11, null]);
    const all = [...first.lines, ...second.lines];
    expect(new Set(all.map((line) => line.id)).size).toBe(61);
    const times = all.map((line) => line.at.getTime());
    expect(times).toEqual([...times].sort((a, b) => b - a));
  });

  test("is read by an auditor of the library, and says verbs in words", async () => {
    const libraryId = await makeLibrary();
    const person = await makePerson();
    const auditor: Actor = {
      kind: "auditor",
      libraryId,
      untilAt: "2027-01-01T00:00:00Z",
      personId: person.id,
      name: person.name,
    };
    expect(await auditList(auditor, {})).toEqual({ lines: [], next: null });
    expect(verbInWords("catalogue.placeHold")).toBe("catalogue: place hold");
  });
});
