/** Controlled lists for describing a cue. Ids are stable; labels may be translated. */

export interface Term {
  readonly id: string;
  readonly label: string;
}

export const genres = [
  { id: "acoustic-folk", label: "acoustic folk" },
  { id: "ambient", label: "ambient" },
  { id: "blues", label: "blues" },
  { id: "brass-and-march", label: "brass and march" },
  { id: "chamber", label: "chamber" },
  { id: "childrens", label: "children's" },
  { id: "choral", label: "choral" },
  { id: "comedy", label: "comedy" },
  { id: "corporate-pop", label: "corporate pop" },
  { id: "country", label: "country" },
  { id: "dance-electronic", label: "dance electronic" },
  { id: "downtempo", label: "downtempo" },
  { id: "drone-and-texture", label: "drone and texture" },
  { id: "funk-and-soul", label: "funk and soul" },
  { id: "heavy-rock", label: "heavy rock" },
  { id: "hip-hop-beat", label: "hip-hop beat" },
  { id: "hybrid-orchestral", label: "hybrid orchestral" },
  { id: "indie-rock", label: "indie rock" },
  { id: "jazz", label: "jazz" },
  { id: "orchestral-drama", label: "orchestral drama" },
  { id: "period-and-archive", label: "period and archive" },
  { id: "regional-tradition", label: "regional tradition" },
] as const satisfies readonly Term[];

export const moods = [
  { id: "awed", label: "awed" },
  { id: "bittersweet", label: "bittersweet" },
  { id: "bright", label: "bright" },
  { id: "brooding", label: "brooding" },
  { id: "calm", label: "calm" },
  { id: "comic", label: "comic" },
  { id: "confident", label: "confident" },
  { id: "curious", label: "curious" },
  { id: "dreamy", label: "dreamy" },
  { id: "driving", label: "driving" },
  { id: "eerie", label: "eerie" },
  { id: "fearful", label: "fearful" },
  { id: "fragile", label: "fragile" },
  { id: "gritty", label: "gritty" },
  { id: "hopeful", label: "hopeful" },
  { id: "lonely", label: "lonely" },
  { id: "menacing", label: "menacing" },
  { id: "nostalgic", label: "nostalgic" },
  { id: "playful", label: "playful" },
  { id: "romantic", label: "romantic" },
  { id: "solemn", label: "solemn" },
  { id: "tender", label: "tender" },
  { id: "tense", label: "tense" },
  { id: "triumphant", label: "triumphant" },
] as const satisfies readonly Term[];

/** The last entry is a sound tag rather than an instrument; it shares the list because buyers look for it there. */
export const instruments = [
  { id: "accordion", label: "accordion" },
  { id: "acoustic-guitar", label: "acoustic guitar" },
  { id: "analogue-synth", label: "analogue synth" },
  { id: "brass-section", label: "brass section" },
  { id: "cello", label: "cello" },
  { id: "choir", label: "choir" },
  { id: "clarinet", label: "clarinet" },
  { id: "double-bass", label: "double bass" },
  { id: "drum-kit", label: "drum kit" },
  { id: "drum-machine", label: "drum machine" },
  { id: "electric-bass", label: "electric bass" },
  { id: "electric-guitar", label: "electric guitar" },
  { id: "electric-piano", label: "electric piano" },
  { id: "fiddle", label: "fiddle" },
  { id: "flute-or-whistle", label: "flute or whistle" },
  { id: "found-sound", label: "found sound" },
  { id: "hand-percussion", label: "hand percussion" },
  { id: "mallets", label: "mallets" },
  { id: "orchestra", label: "orchestra" },
  { id: "organ", label: "organ" },
  { id: "piano", label: "piano" },
  { id: "plucked-small-strings", label: "plucked small strings" },
  { id: "solo-voice", label: "solo voice" },
  { id: "strings", label: "strings" },
  { id: "synth-pad", label: "synth pad" },
  { id: "whistling-and-claps", label: "whistling and claps" },
] as const satisfies readonly Term[];

export const uses = [
  { id: "advert-hard-sell", label: "advert hard-sell" },
  { id: "advert-lifestyle", label: "advert lifestyle" },
  { id: "ident", label: "ident" },
  { id: "charity-appeal", label: "charity appeal" },
  { id: "childrens-programme", label: "children's programme" },
  { id: "comedy-scene", label: "comedy scene" },
  { id: "cookery", label: "cookery" },
  { id: "company-explainer", label: "company explainer" },
  { id: "credits", label: "credits" },
  { id: "crime-and-investigation", label: "crime and investigation" },
  { id: "documentary-human-story", label: "documentary human story" },
  { id: "documentary-nature", label: "documentary nature" },
  { id: "drama-underscore", label: "drama underscore" },
  { id: "game-loop-or-menu", label: "game loop or menu" },
  { id: "history", label: "history" },
  { id: "home-and-garden", label: "home and garden" },
  { id: "news-and-current-affairs", label: "news and current affairs" },
  { id: "podcast-bed", label: "podcast bed" },
  { id: "competition-and-reality", label: "competition and reality" },
  { id: "science-and-technology", label: "science and technology" },
  { id: "sport", label: "sport" },
  { id: "trailer-or-promo", label: "trailer or promo" },
  { id: "travel", label: "travel" },
  { id: "waiting-and-hold", label: "waiting and hold" },
] as const satisfies readonly Term[];

export const voiceKinds = [
  { id: "none", label: "none" },
  { id: "wordless", label: "wordless" },
  { id: "lyric", label: "lyric" },
  { id: "spoken", label: "spoken" },
  { id: "chant", label: "chant" },
  { id: "whistle", label: "whistle" },
] as const satisfies readonly Term[];

/** Band limits in beats per minute: `fromBpm` belongs to the band, `belowBpm` to the next; "free" has none. */
export const tempoBands = [
  { id: "very-slow", label: "very slow", fromBpm: 0, belowBpm: 60 },
  { id: "slow", label: "slow", fromBpm: 60, belowBpm: 80 },
  { id: "medium", label: "medium", fromBpm: 80, belowBpm: 110 },
  { id: "brisk", label: "brisk", fromBpm: 110, belowBpm: 135 },
  { id: "fast", label: "fast", fromBpm: 135, belowBpm: null },
  { id: "free", label: "free", fromBpm: null, belowBpm: null },
] as const;

export const shapes = [
  { id: "steady", label: "steady" },
  { id: "builds", label: "builds" },
  { id: "falls-away", label: "falls away" },
  { id: "builds-then-drops", label: "builds then drops" },
  { id: "two-halves", label: "two halves" },
  { id: "stop-start", label: "stop-start" },
] as const satisfies readonly Term[];

export const densities = [
  { id: "solo", label: "solo" },
  { id: "sparse", label: "sparse" },
  { id: "medium", label: "medium" },
  { id: "full", label: "full" },
] as const satisfies readonly Term[];

export const endings = [
  { id: "button", label: "button" },
  { id: "ring-out", label: "ring-out" },
  { id: "fade", label: "fade" },
  { id: "loop-safe", label: "loop-safe" },
  { id: "cut", label: "cut" },
] as const satisfies readonly Term[];

export type GenreId = (typeof genres)[number]["id"];
export type MoodId = (typeof moods)[number]["id"];
export type InstrumentId = (typeof instruments)[number]["id"];
export type UseId = (typeof uses)[number]["id"];
export type VoiceKindId = (typeof voiceKinds)[number]["id"];
export type TempoBandId = (typeof tempoBands)[number]["id"];
export type ShapeId = (typeof shapes)[number]["id"];
export type DensityId = (typeof densities)[number]["id"];
export type EndingId = (typeof endings)[number]["id"];

export function tempoBandOf(bpm: number | null): TempoBandId {
  if (bpm === null) return "free";
  if (bpm < 60) return "very-slow";
  if (bpm < 80) return "slow";
  if (bpm < 110) return "medium";
  return bpm < 135 ? "brisk" : "fast";
}

export interface SynonymTargets {
  readonly genres?: readonly GenreId[];
  readonly moods?: readonly MoodId[];
  readonly instruments?: readonly InstrumentId[];
  readonly uses?: readonly UseId[];
  readonly voice?: readonly VoiceKindId[];
}

/** What people type, in lower case, and the terms it stands for. */
export const synonyms: Readonly<Record<string, SynonymTargets>> = {
  ukulele: { instruments: ["plucked-small-strings"] },
  uke: { instruments: ["plucked-small-strings"] },
  mandolin: { instruments: ["plucked-small-strings"] },
  zither: { instruments: ["plucked-small-strings"] },
  banjo: { instruments: ["plucked-small-strings"] },
  violin: { instruments: ["fiddle", "strings"] },
  violins: { instruments: ["strings"] },
  guitar: { instruments: ["acoustic-guitar", "electric-guitar"] },
  synth: { instruments: ["analogue-synth", "synth-pad"] },
  synthesiser: { instruments: ["analogue-synth", "synth-pad"] },
  pad: { instruments: ["synth-pad"] },
  pads: { instruments: ["synth-pad"] },
  horns: { instruments: ["brass-section"] },
  brass: { instruments: ["brass-section"] },
  trumpet: { instruments: ["brass-section"] },
  marimba: { instruments: ["mallets"] },
  xylophone: { instruments: ["mallets"] },
  vibraphone: { instruments: ["mallets"] },
  glockenspiel: { instruments: ["mallets"] },
  keys: { instruments: ["piano", "electric-piano"] },
  flute: { instruments: ["flute-or-whistle"] },
  "tin whistle": { instruments: ["flute-or-whistle"] },
  whistling: { instruments: ["whistling-and-claps"], voice: ["whistle"] },
  claps: { instruments: ["whistling-and-claps"] },
  handclaps: { instruments: ["whistling-and-claps"] },
  drums: { instruments: ["drum-kit", "drum-machine"] },
  percussion: { instruments: ["hand-percussion"] },
  tambourine: { instruments: ["hand-percussion"] },
  vocal: { voice: ["lyric", "wordless"] },
  vocals: { voice: ["lyric", "wordless"] },
  singing: { voice: ["lyric", "wordless"] },
  instrumental: { voice: ["none"] },
  sad: { moods: ["bittersweet", "lonely", "solemn"] },
  melancholy: { moods: ["bittersweet", "lonely"] },
  happy: { moods: ["bright", "playful"] },
  cheerful: { moods: ["bright", "playful"] },
  chirpy: { moods: ["bright", "playful"] },
  uplifting: { moods: ["hopeful", "triumphant"] },
  inspiring: { moods: ["hopeful", "confident"] },
  scary: { moods: ["fearful", "eerie"] },
  creepy: { moods: ["eerie"] },
  dark: { moods: ["brooding", "menacing"] },
  sinister: { moods: ["menacing", "eerie"] },
  suspense: { moods: ["tense"] },
  suspenseful: { moods: ["tense"] },
  epic: { moods: ["triumphant", "awed"] },
  funny: { moods: ["comic", "playful"] },
  quirky: { moods: ["curious", "playful"] },
  energetic: { moods: ["driving"] },
  relaxed: { moods: ["calm"] },
  relaxing: { moods: ["calm"] },
  peaceful: { moods: ["calm"] },
  delicate: { moods: ["fragile", "tender"] },
  sentimental: { moods: ["romantic", "nostalgic", "tender"] },
  sentiment: { moods: ["romantic", "nostalgic", "tender"] },
  retro: { moods: ["nostalgic"], genres: ["period-and-archive"] },
  warm: { moods: ["tender", "hopeful"] },
  edgy: { moods: ["gritty"] },
  folk: { genres: ["acoustic-folk"] },
  techno: { genres: ["dance-electronic"] },
  house: { genres: ["dance-electronic"] },
  "lo-fi": { genres: ["downtempo", "hip-hop-beat"] },
  chillout: { genres: ["downtempo", "ambient"] },
  corporate: { genres: ["corporate-pop"], uses: ["company-explainer"] },
  trailer: { uses: ["trailer-or-promo"], genres: ["hybrid-orchestral"] },
  promo: { uses: ["trailer-or-promo"] },
  soul: { genres: ["funk-and-soul"] },
  funk: { genres: ["funk-and-soul"] },
  drone: { genres: ["drone-and-texture"] },
  tango: { genres: ["regional-tradition"] },
  vintage: { genres: ["period-and-archive"], moods: ["nostalgic"] },
  narration: { uses: ["documentary-human-story", "documentary-nature", "podcast-bed"] },
  voiceover: { uses: ["documentary-human-story", "company-explainer", "podcast-bed"] },
  dialogue: { uses: ["drama-underscore"] },
  cooking: { uses: ["cookery"] },
  food: { uses: ["cookery"] },
  kids: { uses: ["childrens-programme"], genres: ["childrens"] },
  wildlife: { uses: ["documentary-nature"] },
  landscape: { uses: ["documentary-nature", "travel"] },
  crime: { uses: ["crime-and-investigation"] },
  detective: { uses: ["crime-and-investigation"] },
  advert: { uses: ["advert-lifestyle", "advert-hard-sell"] },
  commercial: { uses: ["advert-lifestyle", "advert-hard-sell"] },
  training: { uses: ["company-explainer"] },
  game: { uses: ["game-loop-or-menu"] },
  science: { uses: ["science-and-technology"] },
  space: { uses: ["science-and-technology"], moods: ["awed"] },
  gardening: { uses: ["home-and-garden"] },
  news: { uses: ["news-and-current-affairs"] },
};
