import { createHash, randomBytes } from "node:crypto";
import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { invitations, people, signInLinks } from "@/db/schema/accounts";
import { newId } from "@/lib/kernel/ids";
import { makeMembership, makePerson } from "@/tests/support/make";
import { COLUMNS, type Column, type Rows, type World } from "../columns";

const SIGNED_IN = COLUMNS.filter((column) => !["anonymous", "guest", "system"].includes(column));
const EVERYBODY = [...COLUMNS];
const SYSTEM: readonly Column[] = ["system"];
const ADMIN: readonly Column[] = ["admin"];
const PASSWORD = "lantern tideline heron attic";

const hashed = (token: string) => createHash("sha256").update(token).digest("hex");
const freshEmail = () => `row-${randomBytes(6).toString("hex")}@test.example`;
const soon = () => new Date(Date.now() + 600_000);

/** The person behind the column's actor; a new one where nobody stands behind it. */
async function selfOf(world: World, column: Column): Promise<string> {
  const actor = world.actors[column];
  return "personId" in actor ? actor.personId : (await makePerson()).id;
}

async function writerIn(libraryId: string): Promise<string> {
  const { id } = await makePerson();
  await makeMembership({ personId: id, role: "composer", libraryId });
  return id;
}

async function link(): Promise<string> {
  const token = randomBytes(20).toString("hex");
  const { email } = await makePerson();
  await db()
    .insert(signInLinks)
    .values({ tokenHash: hashed(token), email, expiresAt: soon() });
  return token;
}

async function invitation(world: World): Promise<{ id: string; token: string }> {
  const token = randomBytes(20).toString("hex");
  const id = newId("inv");
  await db()
    .insert(invitations)
    .values({
      id,
      email: freshEmail(),
      name: "Somebody",
      role: "composer",
      libraryId: world.libraryId,
      scopeName: "A library",
      granted: [],
      tokenHash: hashed(token),
      invitedBy: (await makePerson()).id,
      expiresAt: soon(),
      createdAt: new Date(),
    });
  return { id, token };
}

const session = async (world: World, column: Column) => ({
  personId: await selfOf(world, column),
  sessionVersion: 1,
});

export const rows = {
  "accounts.readViewer": {
    input: async (world, column) => ({
      ...(await session(world, column)),
      secondFactorAt: null,
      membershipId: null,
    }),
    may: SYSTEM,
  },
  "accounts.readPassword": { input: async () => ({ email: freshEmail() }), may: SYSTEM },
  "accounts.recordPasswordSignIn": {
    input: async (world, column) => ({
      personId: await selfOf(world, column),
      email: freshEmail(),
      address: "a",
    }),
    may: SYSTEM,
  },
  "accounts.takeAttempt": {
    input: async () => ({ door: "password", account: freshEmail(), address: freshEmail() }),
    may: SYSTEM,
  },
  "accounts.takeCode": {
    input: async () => ({
      personId: (await makePerson()).id,
      sessionVersion: 1,
      code: "000000",
      address: "a",
    }),
    may: SYSTEM,
    orAnswers: ["invalid"],
  },
  "accounts.spendSignInLink": { input: async () => ({ token: await link() }), may: SYSTEM },
  "accounts.getSignInLink": { input: async () => ({ token: await link() }), may: EVERYBODY },
  "accounts.requestSignInLink": {
    input: async () => ({ email: freshEmail(), address: freshEmail() }),
    may: EVERYBODY,
  },
  "accounts.getInvitation": {
    input: async (world) => ({ token: (await invitation(world)).token }),
    may: EVERYBODY,
  },
  "accounts.acceptInvitation": {
    input: async (world) => ({ token: (await invitation(world)).token, name: "Somebody" }),
    may: EVERYBODY,
  },
  "accounts.withdrawInvitation": {
    input: async (world) => ({ invitationId: (await invitation(world)).id }),
    may: ["owner", "admin"],
  },
  "accounts.invitePerson": {
    input: async (world) => {
      await writerIn(world.libraryId);
      return { email: freshEmail(), name: "Somebody", role: "composer", libraryId: world.libraryId };
    },
    may: ["owner", "admin", "system"],
  },
  "accounts.listInvitations": {
    input: async () => ({}),
    may: ["owner", "otherOwner", "buyer", "otherBuyer", "admin"],
  },
  "accounts.grantMembership": {
    input: async (world) => ({
      personId: (await makePerson()).id,
      role: "moderator",
      libraryId: world.libraryId,
      scopeName: "A library",
    }),
    may: ["admin", "system"],
  },
  "accounts.endMembership": {
    input: async (world) => ({
      membershipId: await makeMembership({
        personId: await writerIn(world.otherLibraryId),
        role: "composer",
        libraryId: world.libraryId,
      }),
    }),
    may: ["owner", "admin", "system"],
  },
  "accounts.chooseRole": {
    input: async (world, column) => ({
      membershipId: await makeMembership({ personId: await selfOf(world, column), role: "admin" }),
    }),
    may: SIGNED_IN,
  },
  "accounts.registerPerson": {
    input: async () => ({ email: freshEmail(), name: "Somebody" }),
    may: SYSTEM,
  },
  "accounts.disablePerson": { input: async () => ({ personId: (await makePerson()).id }), may: ADMIN },
  "accounts.enablePerson": { input: async () => ({ personId: (await makePerson()).id }), may: ADMIN },
  "accounts.resetSecondFactor": { input: async () => ({ personId: (await makePerson()).id }), may: ADMIN },
  "accounts.listPeople": { input: async () => ({}), may: ADMIN },
  "accounts.setPassword": {
    input: async () => ({ password: PASSWORD }),
    may: SIGNED_IN,
  },
  "accounts.signOutEverywhere": { input: async () => ({}), may: SIGNED_IN },
  "accounts.startSecondFactor": { input: async () => ({}), may: SIGNED_IN },
  "accounts.pendingSecondFactor": { input: async () => ({}), may: SIGNED_IN },
  "accounts.demonstrationCode": {
    input: async (world, column) => {
      await db()
        .update(people)
        .set({ demo: true })
        .where(eq(people.id, await selfOf(world, column)));
      return {};
    },
    may: SIGNED_IN,
  },
  "accounts.setUpDemonstrationFactor": {
    input: async () => ({ personId: (await makePerson({ demo: true })).id }),
    may: SYSTEM,
  },
  "accounts.getAccount": { input: async () => ({}), may: SIGNED_IN },
  "accounts.demonstrationSignIns": { input: async () => ({}), may: EVERYBODY },
  "accounts.registerCompany": {
    input: async () => ({ name: "A company", address: "1 Test Row, Leith", countryCode: "GB" }),
    may: [...SIGNED_IN, "system"],
  },
  "accounts.listSeats": { input: async () => ({}), may: ["buyer", "otherBuyer"] },
  "accounts.confirmName": {
    input: async (world) => ({
      personId: await writerIn(world.libraryId),
      libraryId: world.libraryId,
      legalName: "A Writer",
      creditName: "A Writer",
    }),
    may: ["owner", "staff", "system"],
  },
  "accounts.findWriter": {
    input: async (world) => ({ libraryId: world.libraryId, email: freshEmail() }),
    may: ["composer", "owner", "staff"],
  },
  "accounts.listRoster": {
    input: async () => ({}),
    may: [
      "owner",
      "otherOwner",
      "staff",
      "moderator",
      "otherModerator",
      "accountant",
      "otherAccountant",
      "auditor",
    ],
  },
  "accounts.auditList": { input: async () => ({}), may: ["owner", "otherOwner", "auditor", "admin"] },
} satisfies Rows;
