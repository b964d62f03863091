import type { Metadata } from "next";
import { LinkForm } from "@/components/account/link-form";
import { TextLink } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { HeadSentence } from "@/components/ui/sentence";
import { getSignInLink } from "@/lib/accounts";
import { NotFound } from "@/lib/kernel/errors";
import { viewer } from "@/lib/web";
import { type SearchParams, wordOf } from "../../where-to";

export const metadata: Metadata = { title: "Sign in by a link", referrer: "no-referrer" };

async function findLink(token: string) {
  const { actor } = await viewer();
  try {
    return await getSignInLink(actor, { token });
  } catch (error) {
    if (error instanceof NotFound) return null;
    throw error;
  }
}

export default async function LinkPage({ searchParams }: { searchParams: SearchParams }) {
  const token = wordOf((await searchParams).token) ?? "";
  const link = token.length > 0 && token.length <= 100 ? await findLink(token) : null;
  if (!link) {
    return (
      <Page>
        <HeadSentence>This link does not sign anybody in.</HeadSentence>
        <Problem className="mt-4" remedy={<TextLink href="/sign-in">Have another one sent</TextLink>}>
          It was used already, or is too old.
        </Problem>
      </Page>
    );
  }
  return (
    <Page>
      <HeadSentence>
        {link.hasAccount
          ? `Press the button to sign in as ${link.email}.`
          : `There is no account for ${link.email} yet; this opens one.`}
      </HeadSentence>
      <LinkForm asksName={!link.hasAccount} token={token} />
    </Page>
  );
}
