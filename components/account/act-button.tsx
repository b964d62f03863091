"use client";

import { Button, type ButtonKind } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { Refusal } from "./refusal";
import { type Act, useAct } from "./use-act";

interface ActButtonProps<I> {
  act: Act<I, unknown>;
  input: I;
  words: string;
  busyWords: string;
  kind?: ButtonKind;
  /** A page to go to afterwards; without one the page is shown again as it is then. */
  to?: string;
  /** Where given, a question is asked first: what will happen, in one sentence. */
  question?: { title: string; consequence: string };
}

/** One button that does one thing, with its refusal beneath it. */
export function ActButton<I>({
  act,
  input,
  words,
  busyWords,
  kind = "quiet",
  to,
  question,
}: ActButtonProps<I>) {
  const { run, isRunning, failure } = useAct(act);
  const go = () => run(input, () => to && window.location.assign(to));
  if (!question) {
    return (
      <>
        <Button busy={isRunning && busyWords} kind={kind} onClick={go}>
          {words}
        </Button>
        <Refusal failure={failure} />
      </>
    );
  }
  return (
    <Dialog
      actions={
        <Button busy={isRunning && busyWords} onClick={go}>
          {words}
        </Button>
      }
      closeWord="Leave it"
      description={question.consequence}
      title={question.title}
      trigger={<Button kind={kind}>{words}</Button>}
    >
      <Refusal failure={failure} />
    </Dialog>
  );
}
