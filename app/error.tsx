"use client";

import { Button } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { HeadSentence, Sentence } from "@/components/ui/sentence";

export default function ErrorPage({ error, reset }: { error: Error & { digest?: string }; reset: () => void }) {
  return (
    <Page>
      <HeadSentence>Something went wrong on our side.</HeadSentence>
      <Sentence>Nothing you had saved is lost. Please try again; if it happens again, tell us {error.digest ? `the number ${error.digest}` : "what you were doing"}.</Sentence>
      <Button kind="main" onClick={reset}>
        Try again
      </Button>
    </Page>
  );
}
