import { fmt } from "@/components/ui/format";
import { formatMoney } from "@/lib/kernel/money";
import type { SaleLine } from "@/lib/ledger";

/** One arm of the channel: where it leaves the stream, where it ends, and what it is. */
interface Arm {
  key: string;
  minor: bigint;
  words: string;
  leavesX: number;
  endsX: number;
  fill: string;
}

const WIDTH = 760;
const TOP = 30;
const STREAM_HEIGHT = 190;
/** Least distance between the middles of two labels. */
const LABEL_STEP = 24;

function armsOf(line: SaleLine): Arm[] {
  const taxed = line.netMinor > 0n ? Number((line.taxMinor * 1000n) / line.netMinor) / 10 : 0;
  const payable = { leavesX: 360, endsX: 530 };
  const arms: Arm[] = [
    {
      key: "library",
      minor: line.libraryMinor,
      words: `${line.libraryName} keeps`,
      fill: "fill-depth",
      ...payable,
    },
    ...line.writers.map((writer, index) => ({
      key: `writer ${index}`,
      minor: writer.amountMinor,
      words: `${writer.name}, ${fmt.shareBps(writer.shareBps)}\u00a0%`,
      fill: "fill-shoal-3",
      ...payable,
    })),
    {
      key: "processor",
      minor: line.processorFeeMinor,
      words: "the card's fee",
      leavesX: 280,
      endsX: 440,
      fill: "fill-shoal-1",
    },
    {
      key: "platform",
      minor: line.platformFeeMinor,
      words: `platform, ${fmt.percent(line.platformFeeBps / 100)} of net`,
      leavesX: 200,
      endsX: 350,
      fill: "fill-shoal-1",
    },
    {
      key: "tax",
      minor: line.taxMinor,
      words: `tax, ${fmt.percent(taxed)}, never income`,
      leavesX: 110,
      endsX: 260,
      fill: "fill-shoal-1",
    },
  ];
  return arms.filter(({ minor }) => minor > 0n);
}

interface PlacedArm extends Arm {
  fromY: number;
  toY: number;
  height: number;
}

function place(arms: readonly Arm[], grossMinor: bigint): PlacedArm[] {
  const scale = STREAM_HEIGHT / Number(grossMinor);
  let [streamY, lastMiddle, lastEnd] = [TOP, Number.NEGATIVE_INFINITY, Number.NEGATIVE_INFINITY];
  return arms.map((arm) => {
    const height = Number(arm.minor) * scale;
    const fromY = streamY;
    streamY += height;
    const toY = Math.max(fromY, lastEnd + 7, lastMiddle + LABEL_STEP - height / 2);
    lastMiddle = toY + height / 2;
    lastEnd = toY + height;
    return { ...arm, fromY, toY, height };
  });
}

function bankPath({ leavesX, endsX, fromY, toY, height }: PlacedArm): string {
  const bend = (endsX - leavesX) / 2;
  const [a, b] = [leavesX + bend, endsX - bend];
  const [low, lowEnd] = [fromY + height, toY + height];
  return `M0 ${fromY}H${leavesX}C${a} ${fromY} ${b} ${toY} ${endsX} ${toY}V${lowEnd}C${b} ${lowEnd} ${a} ${low} ${leavesX} ${low}H0Z`;
}

function Gauge({ x, bottomY, figure, words }: { x: number; bottomY: number; figure: string; words: string }) {
  return (
    <g>
      <path className="stroke-ink" d={`M${x + 0.5} ${TOP - 6}V${bottomY}`} fill="none" />
      <text className="fill-ink text-small" x={x} y={TOP - 12}>
        <tspan className="font-strong">{figure}</tspan>
        <tspan className="fill-ink-soft" dx="5">
          {words}
        </tspan>
      </text>
    </g>
  );
}

/** What the buyer paid for one line, parting like a channel; on a narrow screen, and for those who hear it, a list. */
export function SaleDelta({ line }: { line: SaleLine }) {
  const money = (minor: bigint) => formatMoney({ minor, currency: line.currency });
  const arms = place(armsOf(line), line.grossMinor);
  const bottomOf = (...keys: string[]) =>
    Math.max(...arms.filter(({ key }) => !keys.includes(key)).map(({ fromY, height }) => fromY + height));
  const height = Math.max(...arms.map((arm) => arm.toY + arm.height)) + 14;
  const steps = [
    `${money(line.grossMinor)} was paid by the buyer; ${money(line.netMinor)} is the net sale; ${money(line.receiptsMinor)} are the library's receipts.`,
    ...arms.map(({ minor, words }) => `${money(minor)}: ${words}.`),
  ];
  return (
    <>
      <svg
        aria-hidden
        className="hidden h-auto w-full max-w-[760px] overflow-visible @wide:block"
        viewBox={`0 0 ${WIDTH} ${height}`}
      >
        {arms.map((arm) => (
          <path className={`${arm.fill} stroke-contour-edge`} d={bankPath(arm)} key={arm.key} />
        ))}
        <Gauge bottomY={bottomOf()} figure={money(line.grossMinor)} words="paid by the buyer" x={0} />
        <Gauge bottomY={bottomOf("tax")} figure={money(line.netMinor)} words="net sale" x={180} />
        <Gauge
          bottomY={bottomOf("tax", "platform", "processor")}
          figure={money(line.receiptsMinor)}
          words="library receipts"
          x={330}
        />
        {arms.map((arm) => (
          <text
            className="fill-ink text-small"
            key={arm.key}
            x={arm.endsX + 9}
            y={arm.toY + arm.height / 2 + 4.5}
          >
            <tspan className="font-strong">{money(arm.minor)}</tspan>
            <tspan className="fill-ink-soft" dx="6">
              {arm.words}
            </tspan>
          </text>
        ))}
      </svg>
      <ul className="grid gap-0.5 @wide:sr-only">
        {steps.map((step) => (
          <li key={step}>{step}</li>
        ))}
      </ul>
    </>
  );
}
