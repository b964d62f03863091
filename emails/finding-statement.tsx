import { z } from "zod";
import { dateInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Caution, Facts, Items, Letter, Paragraph, Prose, Subhead, Work } from "./parts/letter";
import { instant, line, link, prose, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

const common = { title: line, decidedAt: instant, url: link, zone };

/** What a person is told whose work is held back: the restriction, its grounds, its effects and how to contest it. */
const reasons = {
  since: instant,
  /** Where it applies: "everywhere", or territories. */
  appliesTo: line,
  reliedOn: z.array(line).min(1),
  isFoundBySoftware: z.boolean(),
  /** The clause or the legal ground. */
  rule: line,
  why: prose,
  earnings: line,
  licences: line,
  appealUrl: link,
  appealUntil: instant,
};

const Statement = z.discriminatedUnion("outcome", [
  z.object({ outcome: z.literal("clear"), ...common, explanation: prose.optional() }),
  z.object({
    outcome: z.literal("returned"),
    ...common,
    fixes: z.array(z.object({ code: line, text: prose })).min(1),
  }),
  z.object({ outcome: z.literal("hold"), ...common, ...reasons, untilInWords: line }),
  z.object({ outcome: z.literal("refused"), ...common, ...reasons, reasonCode: line }),
]);

type Statement = z.output<typeof Statement>;
type Restriction = Extract<Statement, { outcome: "hold" | "refused" }>;

function headOf(props: Statement) {
  const title = <Work>{props.title}</Work>;
  switch (props.outcome) {
    case "clear":
      return <>{title} is clear: nothing stands in the way of listing it.</>;
    case "returned":
      return (
        <>
          {title} comes back to you: {props.fixes.length === 1 ? "one thing" : `${props.fixes.length} things`}{" "}
          to fix before listing.
        </>
      );
    case "hold":
      return <>{title} is on hold while a rights question is open.</>;
    case "refused":
      return <>{title} cannot be listed.</>;
  }
}

const subjects: Record<Statement["outcome"], (title: string) => string> = {
  clear: (title) => `${title} is clear`,
  returned: (title) => `${title}: to fix before listing`,
  hold: (title) => `${title} is on hold: our reasons`,
  refused: (title) => `${title} cannot be listed: our reasons`,
};

function Reasons({ props }: { props: Restriction }) {
  const detection = props.isFoundBySoftware
    ? "Software pointed us to it; a person decided."
    : "A person found it and decided.";
  return (
    <>
      <Facts
        facts={[
          [
            "What we did",
            props.outcome === "hold" ? "held back from listing and new sale" : "did not list it",
          ],
          ["Where", props.appliesTo],
          ["Since", timeInWords(props.since, props.zone)],
          ["Until", props.outcome === "hold" ? props.untilInWords : "further notice"],
          ...(props.outcome === "refused" ? ([["Code", props.reasonCode]] as const) : []),
        ]}
      />
      <Subhead>What we relied on</Subhead>
      <Items>{[...props.reliedOn, detection]}</Items>
      <Subhead>Why</Subhead>
      <Prose>{props.why}</Prose>
      <Paragraph>The rule: {props.rule}</Paragraph>
      <Subhead>What it means</Subhead>
      <Paragraph>Earnings: {props.earnings}</Paragraph>
      <Paragraph>Licences already issued: {props.licences}</Paragraph>
      <Subhead>If you disagree</Subhead>
      <Paragraph>
        You can appeal free of charge until {dateInWords(props.appealUntil, props.zone)}. Somebody who had no
        part in this decision listens again and answers each of your points. You can also go to an
        out-of-court dispute body, where one is open to you, or to a court.
      </Paragraph>
      <Action href={props.appealUrl}>Appeal</Action>
    </>
  );
}

export const findingStatement = defineTemplate({
  props: Statement,
  subject: ({ outcome, title }) => subjects[outcome](title),
  body: (props, frame) => (
    <Letter
      head={headOf(props)}
      preview={`Decided on ${timeInWords(props.decidedAt, props.zone)}.`}
      frame={frame}
    >
      <Paragraph>A person decided this on {timeInWords(props.decidedAt, props.zone)}.</Paragraph>
      {props.outcome === "clear" && props.explanation && <Prose>{props.explanation}</Prose>}
      {props.outcome === "returned" && (
        <>
          <Items>{props.fixes.map(({ code, text }) => `${code}: ${text}`)}</Items>
          <Paragraph>Everything else is accepted and kept; you need not send it again.</Paragraph>
        </>
      )}
      {props.outcome === "hold" || props.outcome === "refused" ? (
        <Reasons props={props} />
      ) : (
        <Action href={props.url}>
          {props.outcome === "returned" ? "Fix and send again" : "See the delivery"}
        </Action>
      )}
      <Caution />
    </Letter>
  ),
});
