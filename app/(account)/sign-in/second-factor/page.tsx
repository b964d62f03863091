import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { CodeForm } from "@/components/account/code-form";
import { navFor } from "@/components/shell/nav";
import { ButtonLink } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { HeadSentence, Sentence } from "@/components/ui/sentence";
import { demonstrationCode, getAccount } from "@/lib/accounts";
import { isMarketplace, isSignedIn } from "@/lib/kernel/actor";
import { viewer } from "@/lib/web";
import { type SearchParams, whereTo, wordOf } from "../../where-to";

export const metadata: Metadata = { title: "Second factor" };

/** Every sign-in comes through here: it asks for the code where one is due, and goes on where not. */
export default async function SecondFactorPage({ searchParams }: { searchParams: SearchParams }) {
  const search = await searchParams;
  const { actor, roles } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in");
  const home = roles.some((role) => role.current)
    ? navFor(actor.kind, isMarketplace(actor))[0]?.href
    : "/account";
  const asked = whereTo(search.to);
  const account = await getAccount(actor, {});
  const isDue =
    account.secondFactorSince !== null && (!actor.secondFactorAt || wordOf(search.again) !== null);

  if (!account.secondFactorSince && roles.some((role) => role.needs === "set-up")) {
    const waiting = roles.filter((role) => role.needs === "set-up").map((role) => role.label);
    return (
      <Page>
        <HeadSentence>
          You are signed in; to act as {new Intl.ListFormat("en-GB").format(waiting)}, set up a second factor.
        </HeadSentence>
        <Sentence className="mt-3">
          It is a code from an app on your telephone. Roles that decide, pay or manage ask for it at every
          sign-in.
        </Sentence>
        <div className="mt-6">
          <ButtonLink href="/account#second-factor" kind="main">
            Set it up now
          </ButtonLink>
        </div>
      </Page>
    );
  }
  if (!isDue) redirect(asked ?? home ?? "/");
  const filled = account.demo ? await demonstrationCode(actor, {}) : null;
  return (
    <Page>
      <HeadSentence>
        {wordOf(search.again) !== null
          ? "Money, keys and roles ask for your second factor again."
          : `Welcome, ${account.name}; now the code of your second factor.`}
      </HeadSentence>
      <div className="mt-6">
        <CodeForm demonstration={filled} to={asked ?? "/sign-in/second-factor"} />
      </div>
    </Page>
  );
}
