import { TextLink } from "@/components/ui/button";
import { MoneyChart } from "@/components/ui/chart";
import { fmt } from "@/components/ui/format";
import { Section, Sentence } from "@/components/ui/sentence";
import { Table } from "@/components/ui/table";
import { Title } from "@/components/ui/title";
import { decimalOf, formatMoney } from "@/lib/kernel/money";
import type { SaleLine, SalesGroup, SalesOfCurrency } from "@/lib/ledger";
import { OtherLines } from "./other-lines";
import { SaleLines } from "./sale-lines";
import type { Chosen } from "./sales-head";
import { StandingSteps } from "./standing-steps";

const monthOf = (line: SaleLine) => line.soldAt.toISOString().slice(0, 7);

function isChosen(line: SaleLine, chosen: Chosen): boolean {
  switch (chosen.by) {
    case "cue":
      return (line.familyId ?? line.cueTitle) === chosen.value;
    case "production":
      return (line.productionId ?? line.productionTitle) === chosen.value;
    case "month":
      return monthOf(line) === chosen.value;
    case "state":
      return line.state === chosen.value;
  }
}

function ChosenWords({ chosen, lines }: { chosen: Chosen; lines: readonly SaleLine[] }) {
  const [first] = lines;
  if (!first) return <>No sale fits that any more.</>;
  if (chosen.by === "cue")
    return (
      <>
        Only <Title>{first.cueTitle}</Title>.
      </>
    );
  if (chosen.by === "production") return <>Only {first.productionTitle}.</>;
  if (chosen.by === "month") return <>Only {fmt.date(first.soldAt).replace(/^\d+\s/, "")}.</>;
  return <>Only what is {chosen.value}.</>;
}

function stepsOf(sales: SalesOfCurrency, link: (query: string) => string) {
  const money = (minor: bigint) => formatMoney({ minor, currency: sales.currency });
  const held = sales.lines.filter(({ state }) => state === "held");
  const ends = held
    .flatMap(({ holdEndsAt }) => holdEndsAt ?? [])
    .sort((a, b) => a.getTime() - b.getTime())[0];
  const advances = sales.others
    .filter(({ advancesOf }) => advancesOf.length > 0)
    .reduce((sum, { amountMinor }) => sum + amountMinor, 0n);
  return [
    {
      key: "held",
      mark: held.length > 0 ? ("half" as const) : ("done" as const),
      sentence: (
        <>
          <b>
            <TextLink href={link("state=held")}>{money(sales.heldMinor)}</TextLink>
          </b>{" "}
          is held.
        </>
      ),
      below: ends
        ? `From ${fmt.countWord(held.length, "sale")}; the first is free on ${fmt.date(ends)}, when its refunds close.`
        : "A sale is held until its refunds close, 14 days after it was paid.",
    },
    {
      key: "available",
      mark: sales.availableMinor > 0n ? ("half" as const) : ("open" as const),
      sentence: (
        <>
          <b>
            <TextLink href={link("state=available")}>{money(sales.availableMinor)}</TextLink>
          </b>{" "}
          is available.
        </>
      ),
      below:
        advances > 0n
          ? `${money(advances)} of what came in is advances repaid from their composers' own parts.`
          : sales.availableMinor < 0n
            ? "Refunds and disputes took back more than had come in since."
            : "It goes out with the next payout.",
    },
    {
      key: "paid",
      mark: sales.paidMinor > 0n ? ("done" as const) : ("open" as const),
      sentence: (
        <>
          <b>
            <TextLink href="/payouts">{money(sales.paidMinor)}</TextLink>
          </b>{" "}
          has been paid.
        </>
      ),
      below:
        sales.disputedMinor > 0n ? (
          <>
            <TextLink href={link("state=disputed")}>{money(sales.disputedMinor)}</TextLink> is disputed by
            buyers' banks.
          </>
        ) : (
          "Nothing is disputed."
        ),
    },
  ];
}

function Groups({
  caption,
  groups,
  by,
  currency,
  link,
}: {
  caption: string;
  groups: readonly SalesGroup[];
  by: Chosen["by"];
  currency: string;
  link: (query: string) => string;
}) {
  const money = (minor: bigint) => formatMoney({ minor, currency });
  const name = (group: SalesGroup) => (
    <TextLink href={link(`${by}=${encodeURIComponent(group.key)}`)}>
      {by === "cue" ? <Title>{group.name}</Title> : group.name}
    </TextLink>
  );
  return (
    <Table
      caption={caption}
      columns={[
        { key: "name", head: by === "cue" ? "Cue" : "Production", cell: name },
        { key: "count", head: "Licences", cell: (group) => group.count, figures: true },
        { key: "net", head: "Net sales", cell: (group) => money(group.netMinor), figures: true },
        { key: "kept", head: "Your part now", cell: (group) => money(group.keptMinor), figures: true },
      ]}
      rowKey={(group) => group.key}
      rows={groups}
      sentence={(group) => (
        <>
          {name(group)}: {fmt.count(group.count, "licence")}, {money(group.netMinor)} net, of which{" "}
          <b className="font-strong">{money(group.keptMinor)}</b> is yours now.
        </>
      )}
    />
  );
}

interface SalesOfOneCurrencyProps {
  sales: SalesOfCurrency;
  chosen: Chosen | null;
  /** The past day that is looked at, which its links keep. */
  day: string | null;
}

/** A library's money in one currency: where it stands, every sale with its parts, and the same by month, cue and production. */
export function SalesOfOneCurrency({ sales, chosen, day }: SalesOfOneCurrencyProps) {
  const money = (minor: bigint) => formatMoney({ minor, currency: sales.currency });
  const lines = chosen ? sales.lines.filter((line) => isChosen(line, chosen)) : sales.lines;
  const { totals } = sales;
  const link = (query: string) => `/sales?${[day && `at=${day}`, query].filter(Boolean).join("&")}#sales`;
  return (
    <>
      <StandingSteps steps={stepsOf(sales, link)} />
      <Section className="mt-8" head="Sales" id="sales" note={sales.currency}>
        {chosen && (
          <Sentence className="mb-3">
            <ChosenWords chosen={chosen} lines={lines} /> <TextLink href={link("")}>Show all</TextLink>
          </Sentence>
        )}
        <SaleLines lines={lines} />
        <Sentence className="border-t border-ink pt-3" size="small" soft>
          Of the {money(totals.grossMinor)} that buyers paid: tax {money(totals.taxMinor)}, platform{" "}
          {money(totals.platformFeeMinor)}, card {money(totals.processorFeeMinor)}, the library and its
          writers {money(totals.receiptsMinor)}. Licences that the library issued outside this service are not
          among these sales, and none of their money is in these sums.
        </Sentence>
      </Section>
      {!chosen && sales.others.length > 0 && (
        <Section className="mt-8" head="What else moved the balance">
          <OtherLines currency={sales.currency} lines={sales.others} />
        </Section>
      )}
      <Section className="mt-8" head="By month">
        <MoneyChart
          caption="What each month's sales brought the library, after refunds and disputes"
          points={sales.months.map(({ name, keptMinor }) => ({
            at: name,
            value: Number(decimalOf({ minor: keptMinor, currency: sales.currency })),
            text: money(keptMinor),
          }))}
        />
        <ul className="mt-2 flex flex-wrap gap-x-5">
          {sales.months.map(({ key, name }) => (
            <li key={key}>
              <TextLink href={link(`month=${key}`)}>{name}</TextLink>
            </li>
          ))}
        </ul>
      </Section>
      <Section className="mt-8" head="By cue and by production">
        <Groups
          link={link}
          by="cue"
          caption="Cues, the largest net sale first"
          currency={sales.currency}
          groups={sales.cues}
        />
        <div className="mt-6">
          <Groups
            link={link}
            by="production"
            caption="Productions, the largest net sale first"
            currency={sales.currency}
            groups={sales.productions}
          />
        </div>
      </Section>
    </>
  );
}
