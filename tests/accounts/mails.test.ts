import "@/tests/support/database";
import { describe, expect, test } from "vitest";
import { endMembership, invitePerson, requestSignInLink } from "@/lib/accounts";
import { ANONYMOUS, system } from "@/lib/kernel/actor";
import { isMailName, renderMail } from "@/lib/mail";
import { makeCompany, makeLibrary, makeMembership, makePerson } from "@/tests/support/make";
import { lastMailTo, ownerOf } from "./support";

const frame = { isDemonstration: true, siteUrl: "http://127.0.0.1:3400" };

async function renderedFor(address: string) {
  const { template, props } = await lastMailTo(address);
  if (!isMailName(template)) throw new Error(`no template ${template}`);
  return renderMail(template, props, frame);
}

describe("what this room puts into the outbox can be rendered", () => {
  test("a link to sign in", async () => {
    await requestSignInLink(ANONYMOUS, { email: "render@test.example", address: "192.0.2.150" });
    expect((await renderedFor("render@test.example")).text).toContain(
      `${process.env.SITE_URL}/sign-in/link?token=`,
    );
  });

  test("an invitation", async () => {
    const companyId = await makeCompany({ name: "Thistlemoth Pictures" });
    await invitePerson(system("tests"), {
      email: "seat@test.example",
      name: "Tobias Ekwensi-Brandt",
      role: "buyer",
      companyId,
      mayApprove: true,
    });
    const mail = await renderedFor("seat@test.example");
    expect(mail.text.replace(/\s+/g, " ")).toContain(
      "Sedgewren invites you to join Thistlemoth Pictures as a buyer who may also approve and pay.",
    );
    expect(mail.text).toContain("/invitation/");
  });

  test("a role that ended", async () => {
    const libraryId = await makeLibrary();
    const person = await makePerson({ timeZone: "Europe/London" });
    const membershipId = await makeMembership({
      personId: person.id,
      role: "staff",
      libraryId,
      scopeName: "Saltmarrow",
    });
    await endMembership(await ownerOf(libraryId), { membershipId });
    expect((await renderedFor(person.email)).text.replace(/\s+/g, " ")).toContain(
      "You are no longer a member of staff at Saltmarrow.",
    );
  });
});
