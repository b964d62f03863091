import type {
  DensityId,
  EndingId,
  GenreId,
  InstrumentId,
  MoodId,
  ShapeId,
  TempoBandId,
  UseId,
  VoiceKindId,
} from "@/lib/catalogue/vocabularies";

export interface StructuredBrief {
  readonly genres?: readonly GenreId[];
  readonly moods?: readonly MoodId[];
  readonly instruments?: readonly InstrumentId[];
  readonly uses?: readonly UseId[];
  readonly excludeMoods?: readonly MoodId[];
  readonly excludeInstruments?: readonly InstrumentId[];
  readonly voice?: VoiceKindId;
  readonly tempoBand?: TempoBandId;
  readonly shape?: ShapeId;
  readonly density?: DensityId;
  readonly ending?: EndingId;
  readonly versions?: readonly string[];
  readonly keywords?: readonly string[];
}

export interface JudgedBrief {
  readonly id: string;
  readonly text: string;
  readonly structured: StructuredBrief;
  /** Cue numbers a supervisor would send, would consider, and would be annoyed to see in the first five. */
  readonly right: readonly number[];
  readonly near: readonly number[];
  readonly wrong: readonly number[];
  readonly note: string;
}

/** Judged by reading the catalogue's data, before there was any ranking to please. */
export const judgedBriefs: readonly JudgedBrief[] = [
  {
    id: "fragile-piano",
    text: "fragile piano under narration, no sentiment, opens late",
    structured: {
      instruments: ["piano"],
      moods: ["fragile"],
      uses: ["documentary-human-story"],
      excludeMoods: ["romantic", "nostalgic", "tender"],
      voice: "none",
      shape: "builds",
    },
    right: [1, 36],
    near: [4],
    wrong: [9, 30, 23],
    note: "Cue 9 is under a rights question and would be wrong by mood as well.",
  },
  {
    id: "mapmakers-at-night",
    text: "tense investigation, strings, grows and then stops, no voice",
    structured: {
      instruments: ["strings"],
      moods: ["tense", "brooding"],
      uses: ["crime-and-investigation"],
      voice: "none",
      shape: "builds-then-drops",
    },
    right: [4],
    near: [14, 5, 40],
    wrong: [33, 20, 11],
    note: "",
  },
  {
    id: "breakfast-advert",
    text: "gentle acoustic morning for a kitchen scene, unhurried, 30 seconds",
    structured: {
      moods: ["calm", "hopeful"],
      uses: ["cookery", "advert-lifestyle"],
      genres: ["acoustic-folk"],
      versions: ["30"],
    },
    right: [8],
    near: [2, 13, 20],
    wrong: [24, 18, 5],
    note: "",
  },
  {
    id: "cheeky-whistle",
    text: "someone whistling, claps, walking to work, cheeky, has a 15",
    structured: {
      instruments: ["whistling-and-claps"],
      moods: ["playful", "confident"],
      voice: "whistle",
      versions: ["15"],
    },
    right: [13],
    near: [23, 28],
    wrong: [1, 27, 34],
    note: "23 and 28 have a whistle but are corporate.",
  },
  {
    id: "office-welcome",
    text: "bright positive company film, starts small, with a bed, no shouting",
    structured: {
      moods: ["bright", "confident"],
      uses: ["company-explainer"],
      genres: ["corporate-pop"],
      versions: ["bed"],
    },
    right: [23],
    near: [15],
    wrong: [28, 5, 36],
    note: "28 is the same world at full volume, and has no bed.",
  },
  {
    id: "engineering-drive",
    text: "guitars and drums for an engineering explainer, momentum, 60 not needed",
    structured: {
      instruments: ["electric-guitar", "drum-kit"],
      uses: ["company-explainer", "science-and-technology"],
      moods: ["confident"],
    },
    right: [15],
    near: [20, 23],
    wrong: [26, 30, 3],
    note: "",
  },
  {
    id: "night-motorway",
    text: "dark hard electronic, gritty, night driving, drums can come out",
    structured: { genres: ["dance-electronic"], moods: ["gritty", "driving"], versions: ["no-drums"] },
    right: [24],
    near: [17, 19],
    wrong: [22, 39, 10],
    note: "",
  },
  {
    id: "sunrise-data",
    text: "hopeful electronic build, arpeggios, science, stems needed",
    structured: {
      genres: ["dance-electronic"],
      moods: ["hopeful", "driving"],
      uses: ["science-and-technology"],
      versions: ["stems"],
    },
    right: [17],
    near: [39, 24],
    wrong: [27, 6, 38],
    note: "",
  },
  {
    id: "big-trailer",
    text: "huge trailer, menace then triumph, brass and hits, sting",
    structured: {
      genres: ["hybrid-orchestral"],
      moods: ["menacing", "triumphant"],
      uses: ["trailer-or-promo"],
      versions: ["sting"],
    },
    right: [18],
    near: [19, 27],
    wrong: [8, 22, 36],
    note: "",
  },
  {
    id: "deadline-clock",
    text: "ticking clock, race against time, no brass fanfare",
    structured: {
      moods: ["tense", "driving"],
      keywords: ["ticking", "clock"],
      excludeInstruments: ["brass-section"],
      tempoBand: "fast",
    },
    right: [19],
    near: [40, 18],
    wrong: [3, 12, 25],
    note: "",
  },
  {
    id: "haunted-corridor",
    text: "haunted house, no tempo, no tune, just dread, bed",
    structured: {
      moods: ["eerie", "fearful"],
      genres: ["drone-and-texture"],
      tempoBand: "free",
      versions: ["bed"],
    },
    right: [5],
    near: [34, 27],
    wrong: [33, 14, 21],
    note: "",
  },
  {
    id: "desert-signals",
    text: "empty desert, short-wave radio, lonely and strange",
    structured: { moods: ["eerie", "lonely"], instruments: ["found-sound"], uses: ["documentary-nature"] },
    right: [34],
    near: [5, 3, 27],
    wrong: [31, 28, 16],
    note: "",
  },
  {
    id: "iron-vault",
    text: "slow dark gate opening, metal hits, sting",
    structured: { moods: ["menacing", "brooding"], instruments: ["found-sound"], versions: ["sting"] },
    right: [27],
    near: [18, 5],
    wrong: [11, 20, 26],
    note: "",
  },
  {
    id: "village-dance",
    text: "old village dance, traditional, accordion, history programme",
    structured: { moods: ["playful", "nostalgic"], instruments: ["accordion"], uses: ["history"] },
    right: [29],
    near: [6, 12, 35],
    wrong: [24, 39, 1],
    note: "",
  },
  {
    id: "kids-toy",
    text: "children's cartoon, toy sounds, ukulele, loopable",
    structured: {
      genres: ["childrens"],
      instruments: ["plucked-small-strings"],
      versions: ["loop"],
      moods: ["playful"],
    },
    right: [25, 11],
    near: [10],
    wrong: [7, 19, 36],
    note: "",
  },
  {
    id: "after-hours-jazz",
    text: "late café, piano trio, rain, a minute long",
    structured: {
      genres: ["jazz"],
      instruments: ["piano", "double-bass"],
      moods: ["romantic", "bittersweet"],
      versions: ["60"],
    },
    right: [30],
    near: [36, 38],
    wrong: [21, 24, 32],
    note: "",
  },
  {
    id: "market-heat",
    text: "hot busy market, hand drums, quick, percussion alone possible",
    structured: {
      instruments: ["hand-percussion"],
      moods: ["driving", "bright"],
      uses: ["travel"],
      versions: ["only:percussion"],
    },
    right: [31],
    near: [32, 33],
    wrong: [9, 20, 39],
    note: "",
  },
  {
    id: "remembrance-choir",
    text: "remembrance service, Latin choir, organ, and one without the choir",
    structured: {
      instruments: ["choir", "organ"],
      moods: ["solemn", "awed"],
      voice: "lyric",
      versions: ["without:choir"],
    },
    right: [7],
    near: [14, 3],
    wrong: [10, 15, 22],
    note: "",
  },
  {
    id: "kitchen-caper",
    text: "comedy sneaking in a kitchen, clarinet, no accordion, button ending",
    structured: {
      genres: ["comedy"],
      moods: ["playful", "curious"],
      instruments: ["clarinet"],
      excludeInstruments: ["accordion"],
      ending: "button",
    },
    right: [10],
    near: [16],
    wrong: [35, 4, 37],
    note: "35 has the clarinet but is led by the accordion.",
  },
  {
    id: "night-ferry",
    text: "drifting night crossing, electric piano, slow beat, thins out at the end",
    structured: {
      genres: ["downtempo"],
      moods: ["lonely", "dreamy"],
      instruments: ["electric-piano"],
      shape: "falls-away",
    },
    right: [37],
    near: [22, 39, 36],
    wrong: [13, 18, 28],
    note: "",
  },
];
