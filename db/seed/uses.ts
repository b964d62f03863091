import type { UseInput } from "@/lib/licensing/rate-card";
import type { LicenceRow } from "./data/licences";

const MONTHS: Record<LicenceRow["term"], number | null> = {
  "3-months": 3,
  "1-year": 12,
  "3-years": 36,
  perpetual: null,
};

/** A licence's scope as the rate card takes it. */
export function useOf(row: LicenceRow): UseInput {
  const territory =
    row.territory === "World"
      ? ({ kind: "world" } as const)
      : row.territory === "UK+IE"
        ? ({ kind: "region", region: "UK+IE" } as const)
        : ({ kind: "country", country: row.territory } as const);
  const band = row.tier ? Number(row.tier.replace(/\D/g, "")) - 1 : null;
  return {
    mediaClass: row.mediaClass as UseInput["mediaClass"],
    territory,
    termMonths: MONTHS[row.term],
    ...(band !== null && band >= 0 ? { tier: { band } } : {}),
    episodes: row.episodes,
    cutdowns: row.extraCutdowns,
    studentOrCharity: row.studentOrCharity,
  };
}
