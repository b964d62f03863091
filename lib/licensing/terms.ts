/** The standard terms as each record carries them, in full. A changed text is a new version; old records keep theirs. */
export const TERMS_VERSION = "2026-1, draft for counsel";

const CLAUSES: ReadonlyArray<readonly [string, string]> = [
  [
    "The grant",
    "The licensor lets the licensee synchronise the work, and use the recording, in the production, media, territory and term that this record states, and make the copies of the work and the recording that the production's own copies need. The licence is not exclusive unless this record says so. It belongs to the named production and, where one is named, its end client; it does not pass to another production.",
  ],
  [
    "What is not granted",
    "Public performance and communication to the public are not included: whoever broadcasts, streams or shows the production pays its society. A release of the music as music, a soundtrack album, and everything that this record lists as not included stay with the licensor.",
  ],
  [
    "Edits",
    "The licensee may cut, loop, fade and mix the recording as this record allows. It may not change the tune, add words, make a new recording of the work, take single sounds or parts out for use elsewhere, register the recording or a mix of it with any system that detects music, or train software that makes music or voices.",
  ],
  [
    "Context",
    "The music is not used in a way that harms the author's honour or standing, nor in the contexts that this record excludes. Political, gambling, alcohol, tobacco and medical advertising need the licensor's approval in writing before use.",
  ],
  [
    "Size of the use",
    "The price rests on what the licensee said about the size of the use. When the use grows beyond the stated size, the licensee says so and pays the difference within 30 days.",
  ],
  [
    "Term",
    "Use begins no earlier than the stated start and ends at 23:59:59 of the last day in the stated time zone. Copies already in an archive may stay there without being shown. An advert whose term has ended is taken out of every place the licensee controls.",
  ],
  [
    "Cue sheets and credit",
    "Where this record asks for a cue sheet, the licensee files it, complete and true, with the broadcaster or society within the stated days. Credit is given as stated where the production credits music.",
  ],
  [
    "What the licensor warrants",
    "The licensor has the right to grant this licence. To its best knowledge the work and the recording infringe nobody's rights, and they are original or cleared as declared. It does not warrant fitness for a purpose, that nobody else uses the same music, that no system that detects music will raise a claim, or any clearance of the licensee's own changes.",
  ],
  [
    "When a title is questioned",
    "If somebody claims the music, the licensee says so at once, admits nothing, and lets the licensor lead the defence; the licensor then bears the cost of the claim up to ten times the fee of this licence or 25,000 in its currency, whichever is less. The licensor may replace the music by other music of like length and character. Nobody may stop the production itself: the remedy is money.",
  ],
  [
    "What ends the licence",
    "The licence ends with its term; when its payment is reversed or refunded; when what the licensee said about the use, the client or the size was false; when a use outside it is not mended within 14 days of notice; when it is rescinded for lack of rights; by agreement; or by a court's order. It does not end because the music is taken out of the catalogue, the composer leaves, the library or the copyright is sold, the price or the title changes, or an account is closed.",
  ],
  [
    "Passing it on",
    "The licence may pass to whoever finances, distributes or broadcasts the production, together with the production and within the same scope. It binds later owners of the copyright.",
  ],
  [
    "The marketplace",
    "The seller named on the invoice sells this licence and receives its price. It is not the licensor and gives no warranty of its own beyond the truth of what this record says it did: when it issued the record, and which recordings it compared.",
  ],
  [
    "Law",
    "The law and the courts of the licensor's country apply, as far as the licensee is not protected by law that cannot be set aside.",
  ],
];

export const TERMS_TEXT = CLAUSES.map(([head, text], index) => `${index + 1}. ${head}. ${text}`).join("\n\n");

export const WARRANTIES: readonly string[] = [
  "The licensor has the right to grant this licence.",
  "To the licensor's best knowledge the work and the recording infringe nobody's rights.",
  "The work and the recording are original, or cleared as declared.",
  "Not warranted: fitness, that nobody else uses the same music, absence of claims by systems that detect music, clearance of performing rights or of the licensee's own changes.",
];

export const EDITS_ALLOWED: readonly string[] = ["cut", "loop", "fade", "mix with speech and effects"];
export const EDITS_NOT_ALLOWED: readonly string[] = [
  "change the tune",
  "add words",
  "re-record",
  "take out stems as samples",
  "release as music",
  "claim in detection systems",
  "train AI",
];

export const ARCHIVE_RULE = "Copies already in an archive may stay there; they are not shown again.";
export const PROMO_RULE =
  "Promotion of the same production that shows the music in its own scene is included; a trailer or promotion out of context is not.";
export const NON_EXCLUSIVE = "Not exclusive: others may license the same cue.";
export const TOP_UP_DAYS = 30;
export const CUE_SHEET_DAYS = 30;
