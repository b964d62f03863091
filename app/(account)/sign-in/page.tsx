import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { SignInForm } from "@/components/account/sign-in-form";
import { Page } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { HeadSentence, Sentence } from "@/components/ui/sentence";
import { DEMO_PASSWORD, demonstrationSignIns } from "@/lib/accounts";
import { viewer } from "@/lib/web";
import { type SearchParams, whereTo, wordOf } from "../where-to";

export const metadata: Metadata = { title: "Sign in" };

export default async function SignInPage({ searchParams }: { searchParams: SearchParams }) {
  const search = await searchParams;
  const { actor, person } = await viewer();
  const to = whereTo(search.to);
  if (person) redirect(to ? `/sign-in/second-factor?to=${encodeURIComponent(to)}` : "/sign-in/second-factor");
  const people = await demonstrationSignIns(actor, {});
  return (
    <Page>
      <HeadSentence>
        {wordOf(search.after) === "password"
          ? "The password is set; sign in with it now."
          : "Sign in with your address and password, or have a link sent to you."}
      </HeadSentence>
      {wordOf(search.error) && (
        <Problem className="mt-4" remedy="Please try again.">
          You are not signed in.
        </Problem>
      )}
      <SignInForm demonstration={people.length > 0 ? { people, password: DEMO_PASSWORD } : null} to={to} />
      <Sentence className="mt-10" size="small" soft>
        Whoever has sold, reviewed or bought here was invited by a library, a company or us. To license music
        for a company of your own, have a link sent: it opens an account.
      </Sentence>
    </Page>
  );
}
