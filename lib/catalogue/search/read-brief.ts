import { Brief } from "../schemas";
import { genres, instruments, moods, type SynonymTargets, synonyms, uses, voiceKinds } from "../vocabularies";
import {
  briefTerms,
  countryWords,
  endingWords,
  negations,
  noVoiceWords,
  shapeWords,
  stopWords,
  versionWords,
} from "./brief-words";

type Lexicon = Map<string, SynonymTargets>;

const plain = (text: string) =>
  text.toLowerCase().normalize("NFC").replace(/[’']/g, "").replace(/[–—]/g, "-");

/** Every phrase that stands for controlled terms: labels, synonyms and the words of briefs. */
const lexicon: Lexicon = (() => {
  const map: Lexicon = new Map();
  const add = (phrase: string, targets: SynonymTargets) => {
    const key = plain(phrase).replaceAll("-", " ");
    if (!map.has(key)) map.set(key, targets);
  };
  for (const term of uses) add(term.label, { uses: [term.id] });
  for (const [phrase, targets] of Object.entries({ ...synonyms, ...briefTerms })) add(phrase, targets);
  for (const term of moods) add(term.label, { moods: [term.id] });
  for (const term of instruments) add(term.label, { instruments: [term.id] });
  for (const term of genres) add(term.label, { genres: [term.id] });
  for (const term of voiceKinds) if (term.id !== "none") add(term.label, { voice: [term.id] });
  return map;
})();

const LONGEST_PHRASE = 4;
const AROUND_BPM = 5;
const CLAUSE_END = /^[,;.!?()]$|^(but|though|yet)$/;

/**
 * Reads a brief as people type it: "fragile piano under narration, no sentiment, opens late, 60-80 bpm, has bed". Known
 * phrases become controlled terms, a negation excludes to the end of its clause, and what is left is looked for in the
 * descriptions. It knows these words and no others: it is a table, not a language model.
 */
export function readBrief(typed: string): Brief {
  const found = new Found();
  let rest = ` ${plain(typed.slice(0, 400))} `;
  rest = rest.replace(/"([^"]{2,60})"/g, (_all, phrase: string) => found.keepText(phrase));
  rest = readTempo(rest, found);
  rest = readLength(rest, found);
  rest = readOneStop(rest, found);
  rest = takePhrases(rest, Object.keys(versionWords), (phrase) => found.version(phrase));
  rest = takePhrases(rest, noVoiceWords, () => {
    found.voice = "none";
  });
  rest = takePhrases(rest, Object.keys(shapeWords), (phrase) => {
    found.shape = shapeWords[phrase] ?? null;
  });
  rest = takePhrases(rest, Object.keys(endingWords), (phrase) => {
    found.ending = endingWords[phrase] ?? null;
  });
  readClauses(rest, found);
  return found.brief();
}

class Found {
  readonly moods = new Set<string>();
  readonly uses = new Set<string>();
  readonly lead = new Set<string>();
  readonly genres = new Set<string>();
  readonly versions = new Set<string>();
  readonly not = new Set<string>();
  readonly oneStop = new Set<string>();
  readonly text: string[] = [];
  voice: string | null = null;
  shape: string | null = null;
  ending: string | null = null;
  bpmFrom: number | null = null;
  bpmTo: number | null = null;
  lengthS: number | null = null;

  keepText(phrase: string): string {
    this.text.push(...phrase.split(/\s+/));
    return " , ";
  }

  version(phrase: string): void {
    const wanted = versionWords[phrase];
    if (wanted) this.versions.add(wanted);
  }

  take(targets: SynonymTargets): void {
    for (const id of targets.moods ?? []) this.moods.add(id);
    for (const id of targets.uses ?? []) this.uses.add(id);
    for (const id of targets.instruments ?? []) this.lead.add(id);
    for (const id of targets.genres ?? []) this.genres.add(id);
    const [voice, another] = targets.voice ?? [];
    if (voice) this.voice = another ? "some" : voice;
  }

  exclude(targets: SynonymTargets): void {
    for (const id of targets.moods ?? []) this.not.add(`mood:${id}`);
    for (const id of targets.uses ?? []) this.not.add(`use:${id}`);
    for (const id of targets.instruments ?? []) this.not.add(`instrument:${id}`);
    for (const id of targets.genres ?? []) this.not.add(`genre:${id}`);
    for (const id of targets.voice ?? []) this.not.add(`voice:${id}`);
  }

  /** Asked for and ruled out in one breath means a version without it: "a choir, and one without the choir". */
  private settle(): void {
    const asked = { mood: this.moods, use: this.uses, instrument: this.lead, genre: this.genres };
    for (const [kind, terms] of Object.entries(asked)) {
      for (const term of terms) {
        if (this.not.delete(`${kind}:${term}`) && kind === "instrument")
          this.versions.add(term === "choir" || term === "solo-voice" ? "instrumental" : "no-lead");
      }
    }
  }

  brief(): Brief {
    this.settle();
    const first = (values: Set<string>, most: number) => [...values].slice(0, most);
    return Brief.parse({
      moods: first(this.moods, 8),
      uses: first(this.uses, 8),
      lead: first(this.lead, 8),
      genres: first(this.genres, 8),
      voice: this.voice,
      bpmFrom: this.bpmFrom,
      bpmTo: this.bpmTo,
      shape: this.shape,
      ending: this.ending,
      versions: first(this.versions, 6),
      lengthS: this.lengthS,
      oneStop: [...this.oneStop],
      not: first(this.not, 16),
      text: [...new Set(this.text)].join(" ").slice(0, 200),
    });
  }
}

function takePhrases(text: string, phrases: readonly string[], take: (phrase: string) => void): string {
  let rest = text;
  for (const phrase of [...phrases].sort((a, b) => b.length - a.length)) {
    const pattern = phrase.split(/[- ]/).join("[- ]+");
    rest = rest.replace(new RegExp(`(?<![\\p{L}\\p{N}])${pattern}(?![\\p{L}\\p{N}])`, "gu"), () => {
      take(phrase);
      return " , ";
    });
  }
  return rest;
}

const bounded = (bpm: number) => Math.min(400, Math.max(20, bpm));

function readTempo(text: string, found: Found): string {
  const range = (from: number | null, to: number | null) => {
    found.bpmFrom = from === null ? null : bounded(from);
    found.bpmTo = to === null ? null : bounded(to);
    return " , ";
  };
  return text
    .replace(/(\d{2,3})\s*(?:-|to|and)\s*(\d{2,3})\s*(?:bpm|beats)/g, (_all, a, b) =>
      range(Math.min(+a, +b), Math.max(+a, +b)),
    )
    .replace(/(?:under|below|at most|slower than)\s*(\d{2,3})\s*bpm/g, (_all, to) => range(null, +to))
    .replace(/(?:over|above|at least|faster than)\s*(\d{2,3})\s*bpm/g, (_all, from) => range(+from, null))
    .replace(/(?:around|about|near|at)?\s*(\d{2,3})\s*bpm/g, (_all, bpm) =>
      range(+bpm - AROUND_BPM, +bpm + AROUND_BPM),
    )
    .replace(/\bvery slow(ly)?\b/g, () => range(null, 60))
    .replace(/\b(?<!slow[- ]?)slow(ly)?\b/g, () => range(null, 80))
    .replace(/\b(?:mid|medium)[- ]?(?:tempo|paced?)\b/g, () => range(80, 110))
    .replace(/\bbrisk(ly)?\b/g, () => range(110, 135))
    .replace(/\b(?:fast|up-?tempo)\b/g, () => range(120, null));
}

function readLength(text: string, found: Found): string {
  const length = (seconds: number) => {
    found.lengthS = Math.min(3600, Math.max(1, Math.round(seconds)));
    return " , ";
  };
  return text
    .replace(/\b(\d{1,2}):([0-5]\d)\b/g, (_all, minutes, seconds) => length(60 * +minutes + +seconds))
    .replace(/\b(\d{1,3})[- ]?(?:s|secs?|seconds?)\b/g, (_all, seconds) => length(+seconds))
    .replace(/\b(\d{1,2}(?:\.\d)?)[- ]?(?:mins?|minutes?)\b/g, (_all, minutes) => length(60 * +minutes));
}

function readOneStop(text: string, found: Found): string {
  return text.replace(
    /\bone[- ]stop\b((?:[\s+,&]|and|in|for|the)*(?:\b(?:[a-z]+)\b)?(?:(?:[\s+&]|and|the)+[a-z]+)*)/g,
    (_all, tail: string) => {
      const words = tail.split(/[^a-z]+/).filter(Boolean);
      const countries = words.flatMap((word) => countryWords[word] ?? []);
      for (const country of countries.length > 0 ? countries : ["*"]) found.oneStop.add(country);
      return ` , ${words.filter((word) => !(word in countryWords)).join(" ")} `;
    },
  );
}

/** Walks what is left word by word, longest known phrase first. */
function readClauses(text: string, found: Found): void {
  const tokens = text.replaceAll("-", " ").match(/[\p{L}\p{N}]+|[,;.!?()]/gu) ?? [];
  let excluding = false;
  for (let at = 0; at < tokens.length; ) {
    const token = tokens[at] ?? "";
    if (CLAUSE_END.test(token)) excluding = false;
    else if ((negations as readonly string[]).includes(token)) excluding = true;
    else {
      const known = longestKnown(tokens, at);
      if (known) {
        if (excluding) found.exclude(known.targets);
        else found.take(known.targets);
        at += known.length;
        continue;
      }
      if (token === "with") excluding = false;
      else if (!stopWords.has(token) && token.length > 1) {
        if (excluding) found.not.add(`word:${token}`);
        else found.text.push(token);
      }
    }
    at += 1;
  }
}

function longestKnown(
  tokens: readonly string[],
  at: number,
): { targets: SynonymTargets; length: number } | null {
  for (let length = Math.min(LONGEST_PHRASE, tokens.length - at); length > 0; length--) {
    const phrase = tokens.slice(at, at + length).join(" ");
    const targets = lexicon.get(phrase) ?? lexicon.get(phrase.replace(/s$/, ""));
    if (targets) return { targets, length };
  }
  return null;
}
