import type { RateCard, Use } from "@/lib/licensing/rate-card";

/** "a TV programme with catch-up, the UK and Ireland, three years, one episode" */
export function wordsOfUse(use: Use, card: RateCard | null, countries: (code: string) => string): string {
  const row = card?.classes.find(({ code }) => code === use.mediaClass);
  const parts = [
    row?.words ?? use.mediaClass,
    territoryWords(use, row?.worldIncluded ?? false, card, countries),
    termWords(use, card),
    ...(row?.perEpisode ? [use.episodes === 1 ? "one episode" : `${use.episodes} episodes`] : []),
    ...(use.tier && "band" in use.tier && row?.tier.kind === "bands"
      ? [`${row.tier.measure}: ${row.tier.bands[use.tier.band]?.words ?? ""}`]
      : []),
    ...(use.cutdowns > 0 ? [`${use.cutdowns} extra cutdowns`] : []),
  ];
  return parts.join(", ");
}

function territoryWords(
  { territory }: Use,
  isWorld: boolean,
  card: RateCard | null,
  countries: (code: string) => string,
): string {
  if (isWorld || territory.kind === "world") return "World";
  if (territory.kind === "country") return countries(territory.country);
  return card?.regions.find(({ code }) => code === territory.region)?.words ?? territory.region;
}

function termWords({ termMonths }: Use, card: RateCard | null): string {
  const row = card?.terms.find(({ months }) => months === termMonths);
  return row?.words ?? (termMonths === null ? "perpetual" : `${termMonths} months`);
}
