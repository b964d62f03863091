"use client";

import {
  Bar,
  BarChart,
  CartesianGrid,
  Line,
  LineChart,
  ResponsiveContainer,
  Tooltip,
  XAxis,
  YAxis,
} from "recharts";

export interface ChartPoint {
  /** The month or day, written out: "March". */
  at: string;
  /** In major units, for drawing only. */
  value: number;
  /** The figure as it is written: "£196.73". */
  text: string;
}

interface MoneyChartProps {
  /** What the chart shows, as a sentence; also its caption. */
  caption: string;
  points: readonly ChartPoint[];
  /** How a mark of the axis is written. */
  axisText?: (value: number) => string;
  kind?: "bars" | "line";
}

const AXIS = { tickLine: false, tick: { fill: "var(--color-ink-soft)", fontSize: 12.5 } };

function Reading({ active, payload }: { active?: boolean; payload?: readonly { payload?: ChartPoint }[] }) {
  const point = payload?.[0]?.payload;
  if (!active || !point) return null;
  return (
    <p className="rounded-plain border border-ink bg-page px-2 py-1 text-small">
      {point.at}: <b>{point.text}</b>
    </p>
  );
}

/** Sums over time, as bars or a line, with the same figures as a list for those who do not see it. */
export function MoneyChart({ caption, points, axisText = String, kind = "bars" }: MoneyChartProps) {
  const data = [...points];
  const axes = [
    <CartesianGrid key="grid" stroke="var(--color-line)" vertical={false} />,
    <XAxis axisLine={{ stroke: "var(--color-ink)" }} dataKey="at" key="x" {...AXIS} />,
    <YAxis axisLine={false} key="y" tickFormatter={axisText} width={64} {...AXIS} />,
    <Tooltip
      content={<Reading />}
      cursor={{ fill: "var(--color-shoal-1)" }}
      isAnimationActive={false}
      key="tip"
    />,
  ];
  return (
    <figure>
      <figcaption className="mb-2 font-strong">{caption}</figcaption>
      <div aria-hidden className="h-56 w-full">
        <ResponsiveContainer height="100%" width="100%">
          {kind === "bars" ? (
            <BarChart accessibilityLayer={false} data={data}>
              {axes}
              <Bar
                dataKey="value"
                fill="var(--color-shoal-2)"
                isAnimationActive={false}
                maxBarSize={48}
                stroke="var(--color-contour-edge)"
              />
            </BarChart>
          ) : (
            <LineChart accessibilityLayer={false} data={data}>
              {axes}
              <Line
                dataKey="value"
                dot={{ fill: "var(--color-page)", stroke: "var(--color-depth)", r: 3 }}
                isAnimationActive={false}
                stroke="var(--color-depth)"
                strokeWidth={1.5}
              />
            </LineChart>
          )}
        </ResponsiveContainer>
      </div>
      <ul className="sr-only">
        {points.map((point) => (
          <li key={point.at}>
            {point.at}: {point.text}
          </li>
        ))}
      </ul>
    </figure>
  );
}
