"use client";

import { Table } from "@/components/ui/table";

export interface Factor {
  kind: string;
  label: string;
  value: string;
}

const isNeutral = ({ kind, value }: Factor) => kind !== "base" && value === "1";

/** Why this price: the base and every factor, those of 1 named too. */
export function FactorTable({ factors, currency }: { factors: readonly Factor[]; currency: string }) {
  const shown = (factor: Factor) =>
    factor.kind === "base" ? `${currency} ${factor.value}` : `× ${factor.value}`;
  return (
    <Table
      caption="Why this price"
      captionHidden
      columns={[
        { key: "kind", head: "What", cell: (factor) => factor.kind },
        {
          key: "label",
          head: "As you said it",
          cell: (factor) => <span className={isNeutral(factor) ? "text-ink-soft" : ""}>{factor.label}</span>,
        },
        { key: "value", head: "Factor", figures: true, cell: shown },
      ]}
      rowKey={(factor) => factor.kind}
      rows={factors}
      sentence={(factor) => `${factor.kind}: ${factor.label}, ${shown(factor)}`}
    />
  );
}
