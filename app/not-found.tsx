import { TextLink } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { HeadSentence, Sentence } from "@/components/ui/sentence";

export default function NotFoundPage() {
  return (
    <Page>
      <HeadSentence>There is nothing at this address, or it is not yours to see.</HeadSentence>
      <Sentence>
        If you are signed in with more than one role, the page may belong to another of them. You can <TextLink href="/find">find a cue</TextLink> or <TextLink href="/check">check a licence</TextLink> from here.
      </Sentence>
    </Page>
  );
}
