import { type Actor, ANONYMOUS, system } from "@/lib/kernel/actor";
import { makeCompany, makeLibrary, makePerson } from "@/tests/support/make";
import type { World } from "./columns";

export async function makeWorld(): Promise<World> {
  const [libraryId, otherLibraryId] = [await makeLibrary(), await makeLibrary()];
  const [companyId, otherCompanyId] = [await makeCompany(), await makeCompany()];
  const as = async (make: (person: { personId: string; name: string; secondFactorAt: string }) => Actor) => {
    const person = await makePerson();
    return make({ personId: person.id, name: person.name, secondFactorAt: new Date().toISOString() });
  };
  const inLibrary = (kind: "composer" | "owner", id: string) =>
    as((person) => ({ kind, libraryId: id, ...person }));
  const untilAt = new Date(Date.now() + 86_400_000).toISOString();
  return {
    libraryId,
    otherLibraryId,
    companyId,
    otherCompanyId,
    actors: {
      anonymous: ANONYMOUS,
      guest: { kind: "guest", linkId: "lnk_none", name: "A guest" },
      person: await as((person) => ({ kind: "person", ...person })),
      composer: await inLibrary("composer", libraryId),
      otherComposer: await inLibrary("composer", otherLibraryId),
      owner: await inLibrary("owner", libraryId),
      otherOwner: await inLibrary("owner", otherLibraryId),
      staff: await as((person) => ({
        kind: "staff",
        libraryId,
        granted: ["list", "editorial", "payouts"],
        ...person,
      })),
      moderator: await as((person) => ({ kind: "moderator", libraryId, ...person })),
      otherModerator: await as((person) => ({ kind: "moderator", libraryId: otherLibraryId, ...person })),
      marketplaceModerator: await as((person) => ({ kind: "moderator", libraryId: null, ...person })),
      buyer: await as((person) => ({ kind: "buyer", companyId, mayApprove: true, ...person })),
      otherBuyer: await as((person) => ({
        kind: "buyer",
        companyId: otherCompanyId,
        mayApprove: true,
        ...person,
      })),
      accountant: await as((person) => ({ kind: "accountant", libraryId, ...person })),
      otherAccountant: await as((person) => ({ kind: "accountant", libraryId: otherLibraryId, ...person })),
      marketplaceAccountant: await as((person) => ({ kind: "accountant", libraryId: null, ...person })),
      auditor: await as((person) => ({ kind: "auditor", libraryId, untilAt, ...person })),
      admin: await as((person) => ({ kind: "admin", ...person })),
      system: system("the matrix"),
    },
  };
}
