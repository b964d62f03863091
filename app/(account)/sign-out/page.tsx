import type { Metadata } from "next";
import { SignOutForm } from "@/components/account/sign-out-form";
import { TextLink } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { HeadSentence, Sentence } from "@/components/ui/sentence";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Sign out" };

export default async function SignOutPage() {
  const { person } = await viewer();
  if (!person) {
    return (
      <Page>
        <HeadSentence>You are not signed in.</HeadSentence>
        <Sentence className="mt-3">
          <TextLink href="/sign-in">Sign in</TextLink>
        </Sentence>
      </Page>
    );
  }
  return (
    <Page>
      <HeadSentence>You are signed in as {person.name}.</HeadSentence>
      <Sentence className="mt-3" soft>
        To end your sessions on every device, use <TextLink href="/account">your account</TextLink>.
      </Sentence>
      <SignOutForm />
    </Page>
  );
}
