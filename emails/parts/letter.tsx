import {
  Body,
  Container,
  Head,
  Heading,
  Hr,
  Html,
  Link,
  Preview,
  Section,
  Text,
} from "@react-email/components";
import { Children, type ReactNode } from "react";
import type { Frame } from "../template";
import { colour, SANS, SERIF } from "./look";

const DARK = `@media (prefers-color-scheme: dark) {
  body, .page { background: #0E1A22 !important; color: #E8EEF1 !important }
  .ink { color: #E8EEF1 !important } .soft { color: #A9B8C1 !important } .table { background: #2A2413 !important }
  .rule { border-color: #2A3A45 !important } .main { background: #F27DB8 !important; color: #0E1A22 !important }
}`;

interface LetterProps {
  /** The state of affairs in one sentence. */
  head: ReactNode;
  /** The same as plain text, for the line that inboxes show. */
  preview: string;
  frame: Frame;
  children: ReactNode;
}

/** The page of every mail. */
export function Letter({ head, preview, frame, children }: LetterProps) {
  return (
    <Html lang="en-GB">
      <Head>
        <meta name="color-scheme" content="light dark" />
        <style>{DARK}</style>
      </Head>
      <Preview>{preview}</Preview>
      <Body
        className="page"
        style={{ margin: 0, background: colour.page, color: colour.ink, fontFamily: SANS }}
      >
        <Container style={{ maxWidth: "38rem", padding: "1.5rem 1.25rem" }}>
          <Text className="soft" style={{ margin: "0 0 1rem", fontSize: 14, color: colour.soft }}>
            Sedgewren
            {frame.isDemonstration
              ? ". Demonstration: the people, companies and music in this mail are invented."
              : ""}
          </Text>
          <Heading
            as="h1"
            className="ink"
            style={{ margin: "0 0 1rem", fontSize: 21, lineHeight: 1.35, fontWeight: 500 }}
          >
            {head}
          </Heading>
          {children}
          <Hr className="rule" style={{ margin: "1.75rem 0 1rem", borderColor: colour.line }} />
          <Text className="soft" style={{ margin: 0, fontSize: 13, lineHeight: 1.5, color: colour.soft }}>
            Sent by Sedgewren,{" "}
            <Link href={frame.siteUrl} style={{ color: colour.soft }}>
              {new URL(frame.siteUrl).host}
            </Link>
            .{frame.isDemonstration ? " Demonstration: no money moves and no licence is granted." : ""}
          </Text>
        </Container>
      </Body>
    </Html>
  );
}

export function Paragraph({ children }: { children: ReactNode }) {
  return (
    <Text className="ink" style={{ margin: "0 0 .9rem", fontSize: 15.5, lineHeight: 1.5 }}>
      {children}
    </Text>
  );
}

/** What a person wrote, with its own line breaks. */
export function Prose({ children }: { children: string }) {
  const paragraphs = children.split(/\n\s*\n/);
  return (
    <>
      {Children.map(paragraphs, (text) => (
        <Paragraph>
          {Children.map(text.split("\n"), (row, index) => (
            <>
              {index > 0 && <br />}
              {row}
            </>
          ))}
        </Paragraph>
      ))}
    </>
  );
}

export function Subhead({ children }: { children: ReactNode }) {
  return (
    <Heading as="h2" className="ink" style={{ margin: "1.5rem 0 .4rem", fontSize: 16.5, fontWeight: 500 }}>
      {children}
    </Heading>
  );
}

/** The title of a musical work: italic serif, and nothing else is. */
export function Work({ children }: { children: ReactNode }) {
  return <em style={{ fontFamily: SERIF, fontStyle: "italic" }}>{children}</em>;
}

/** The one thing to do next. */
export function Action({ href, children }: { href: string; children: ReactNode }) {
  return (
    <Section style={{ margin: "1.25rem 0" }}>
      <Link
        href={href}
        className="main"
        style={{
          display: "inline-block",
          background: colour.magenta,
          color: colour.page,
          padding: ".6rem 1.1rem",
          borderRadius: 3,
          fontSize: 15.5,
          textDecoration: "none",
        }}
      >
        {children}
      </Link>
    </Section>
  );
}

export function Items({ children }: { children: readonly ReactNode[] }) {
  return (
    <ul style={{ margin: "0 0 .9rem", paddingLeft: "1.25rem" }}>
      {Children.map(children, (item) => (
        <li
          className="ink"
          style={{ margin: ".3rem 0", fontSize: 15.5, lineHeight: 1.5, overflowWrap: "anywhere" }}
        >
          {item}
        </li>
      ))}
    </ul>
  );
}

/** Named facts, one a line. */
export function Facts({ facts }: { facts: readonly (readonly [name: string, value: ReactNode])[] }) {
  return (
    <Section className="table" style={{ background: colour.buff, padding: ".5rem 1rem", margin: "0 0 1rem" }}>
      {facts.map(([name, value]) => (
        <Text
          key={name}
          className="ink"
          style={{ margin: ".35rem 0", fontSize: 15, lineHeight: 1.5, overflowWrap: "anywhere" }}
        >
          {name}: {value}
        </Text>
      ))}
    </Section>
  );
}

/** Stands on everything that speaks of similarity. */
export function Caution() {
  return (
    <Text
      className="soft"
      style={{ margin: "1.25rem 0 0", fontSize: 14, lineHeight: 1.5, color: colour.soft }}
    >
      Similarity evidence is technical. It is not a finding of infringement or of originality, and absence of
      a match is not clearance.
    </Text>
  );
}
