import type { RateCardClass } from "./rate-card";

type Code = RateCardClass["code"];

interface MediaWords {
  /** What the class includes beyond its own name. */
  included: readonly string[];
  /** Whether the trade files cue sheets for it, and whether it usually credits music. */
  cueSheet: boolean;
  credit: boolean;
}

/** Common practice. */
export const MEDIA: Readonly<Record<Code, MediaWords>> = {
  MC01: { included: ["streams and downloads of the episodes"], cueSheet: false, credit: true },
  MC02: { included: ["the licensee's own sites and channels"], cueSheet: false, credit: false },
  MC03: { included: ["paid placements online"], cueSheet: false, credit: false },
  MC04: { included: ["training, meetings and the intranet"], cueSheet: false, credit: false },
  MC05: { included: ["the event or place named as the production"], cueSheet: false, credit: false },
  MC06: {
    included: ["broadcast", "repeats within the term", "catch-up within the term"],
    cueSheet: true,
    credit: true,
  },
  MC07: { included: ["radio and the same advert online as sound"], cueSheet: true, credit: false },
  MC08: { included: ["television and its catch-up"], cueSheet: true, credit: false },
  MC09: { included: ["cinema screens"], cueSheet: true, credit: false },
  MC10: { included: ["festival screenings and juries"], cueSheet: true, credit: true },
  MC11: {
    included: ["cinemas", "television", "discs and downloads", "subscription services"],
    cueSheet: true,
    credit: true,
  },
  MC12: { included: ["the service named as the client"], cueSheet: true, credit: true },
  MC13: { included: ["the game or app, its updates and its gameplay videos"], cueSheet: false, credit: true },
  MC14: { included: ["trailers and promotion out of context"], cueSheet: true, credit: false },
  MC15: { included: ["reproduction for the lines or places counted"], cueSheet: false, credit: false },
};

/** Other media that people commonly take to be included, so the record says that they are not. */
const OFTEN_ASSUMED: ReadonlyArray<readonly [string, readonly Code[]]> = [
  ["Adverts of any kind", ["MC03", "MC07", "MC08", "MC09"]],
  ["Cinema", ["MC09", "MC11"]],
  ["Subscription and on-demand services", ["MC11", "MC12"]],
  ["Games and apps", ["MC13"]],
  ["Trailers and promotion out of context", ["MC14"]],
];

export function notIncludedWith(code: Code): string[] {
  const media = OFTEN_ASSUMED.filter(([, codes]) => !codes.includes(code)).map(([words]) => words);
  return [
    `${media.join("; ")}.`,
    "Theme, title and signature use.",
    "A soundtrack release or any other release of the music as music.",
  ];
}
