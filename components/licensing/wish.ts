import { type RateCard, Use } from "@/lib/licensing/rate-card";

/** A use as it stands in the sentence while it is being said. */
export interface Wish {
  mediaClass: string;
  /** "world", "region:UK+IE", "country:GB" */
  territory: string;
  /** Months, or "perpetual". */
  term: string;
  band: string;
  episodes: number;
  cutdowns: number;
  tagChanges: number;
  studentOrCharity: boolean;
}

export const PERPETUAL = "perpetual";

export const classOf = (card: RateCard, wish: Wish) =>
  card.classes.find(({ code }) => code === wish.mediaClass);

export function wishOf(use: Use | null, card: RateCard): Wish {
  const { territory } = use ?? {};
  const where = !territory
    ? card.regions[0]
      ? `region:${card.regions[0].code}`
      : "world"
    : territory.kind === "region"
      ? `region:${territory.region}`
      : territory.kind === "country"
        ? `country:${territory.country}`
        : "world";
  return {
    mediaClass: use?.mediaClass ?? "MC06",
    territory: where,
    term: use ? String(use.termMonths ?? PERPETUAL) : "12",
    band: use?.tier && "band" in use.tier ? String(use.tier.band) : "0",
    episodes: use?.episodes ?? 1,
    cutdowns: use?.cutdowns ?? 0,
    tagChanges: use?.tagChanges ?? 0,
    studentOrCharity: use?.studentOrCharity ?? false,
  };
}

function territoryOf(wish: Wish, isWorld: boolean) {
  const [kind, code = ""] = wish.territory.split(":");
  if (isWorld || kind === "world") return { kind: "world" as const };
  return kind === "region"
    ? { kind: "region" as const, region: code }
    : { kind: "country" as const, country: code };
}

/** The use that is wanted; null while it is not whole. What its class does not know is left out. */
export function wantedUse(wish: Wish, card: RateCard): Use | null {
  const row = classOf(card, wish);
  if (!row) return null;
  const parsed = Use.safeParse({
    mediaClass: wish.mediaClass,
    territory: territoryOf(wish, row.worldIncluded),
    termMonths: wish.term === PERPETUAL ? null : Number(wish.term),
    ...(row.tier.kind === "bands" ? { tier: { band: Number(wish.band) } } : {}),
    episodes: row.perEpisode ? wish.episodes : 1,
    cutdowns: row.cutdowns ? wish.cutdowns : 0,
    tagChanges: row.cutdowns ? wish.tagChanges : 0,
    studentOrCharity: row.studentOrCharity && wish.studentOrCharity,
  });
  return parsed.success ? parsed.data : null;
}
