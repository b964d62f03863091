import type { ComposerKey, LibraryCode } from "./cue-row";

export type CompanyKey =
  | "thistlemoth"
  | "skerrymore"
  | "plumb-ferrule"
  | "lorne"
  | "ives-okafor-wren"
  | "cloudbarrow"
  | "hargrove-lindqvist"
  | "quillbeck"
  | "ferries-student";

/** One person may hold several; the first is the one they sign in to. */
export type RoleRow =
  | {
      readonly role: "composer";
      readonly library: LibraryCode;
      readonly deals: readonly ("exclusive" | "non-exclusive")[];
    }
  | { readonly role: "owner" | "library-staff"; readonly library: LibraryCode }
  | { readonly role: "moderator" | "accountant"; readonly library: LibraryCode | null }
  | { readonly role: "admin" }
  | {
      readonly role: "buyer";
      readonly company: CompanyKey;
      readonly seat: "propose" | "approve";
      readonly does: string;
    }
  | { readonly role: "client-guest"; readonly company: CompanyKey; readonly does: string };

export interface PersonRow {
  readonly key: string;
  readonly name: string;
  readonly email: string;
  readonly place: string;
  readonly timeZone: string;
  readonly roles: readonly RoleRow[];
  readonly ipi: string | null;
  readonly note: string;
}

export interface ComposerRow extends PersonRow {
  readonly key: ComposerKey;
  readonly ipi: string;
  /** Paid early and not yet earned back. */
  readonly unrecoupedAdvanceMinor: number;
}

const exclusive = ["exclusive"] as const;
const nonExclusive = ["non-exclusive"] as const;
const both = ["exclusive", "non-exclusive"] as const;

export const composers: readonly ComposerRow[] = [
  {
    key: "A",
    name: "Ailsa Trevarrick-Moe",
    email: "ailsa@trevarrick-moe.example",
    place: "Kirkwall, UK",
    timeZone: "Europe/London",
    roles: [{ role: "composer", library: "SM", deals: exclusive }],
    ipi: "99900000158",
    unrecoupedAdvanceMinor: 0,
    note: "Plays fiddle and guitar, records live, keeps meticulous papers; blind, uses a screen reader.",
  },
  {
    key: "B",
    name: "Bastian Okonjo-Lund",
    email: "bastian@okonjolund.example",
    place: "Malmö, SE",
    timeZone: "Europe/Stockholm",
    roles: [
      { role: "composer", library: "BC", deals: both },
      { role: "composer", library: "OA", deals: nonExclusive },
    ],
    ipi: "99900000256",
    unrecoupedAdvanceMinor: 0,
    note: "Writes for two libraries on different terms.",
  },
  {
    key: "C",
    name: "Celandine Harrowgill",
    email: "celandine@harrowgill.example",
    place: "Hexham, UK",
    timeZone: "Europe/London",
    roles: [{ role: "composer", library: "SM", deals: exclusive }],
    ipi: "99900000354",
    unrecoupedAdvanceMinor: 4500,
    note: "Piano and strings; has an unrecouped advance of £45.00.",
  },
  {
    key: "D",
    name: "Dov Marchetti-Ruane",
    email: "dov@marchettiruane.example",
    place: "Hamilton, CA",
    timeZone: "America/Toronto",
    roles: [{ role: "composer", library: "BC", deals: both }],
    ipi: "99900000452",
    unrecoupedAdvanceMinor: 0,
    note: "Prolific corporate writer; uses licensed loops; forgets to link cutdowns.",
  },
  {
    key: "E",
    name: "Eluned Pryce-Santoro",
    email: "eluned@prycesantoro.example",
    place: "Aberaeron, UK",
    timeZone: "Europe/London",
    roles: [
      { role: "composer", library: "SM", deals: exclusive },
      { role: "composer", library: "BC", deals: exclusive },
    ],
    ipi: "99900000550",
    unrecoupedAdvanceMinor: 0,
    note: "Choral and songs; registers lyrics; one co-write at Brindlecote.",
  },
  {
    key: "F",
    name: "Farrukh Tollander",
    email: "farrukh@tollander.example",
    place: "Ghent, BE",
    timeZone: "Europe/Brussels",
    roles: [{ role: "composer", library: "OA", deals: nonExclusive }],
    ipi: "99900000648",
    unrecoupedAdvanceMinor: 0,
    note: "Percussion and field recordings; hard of hearing, relies on level displays.",
  },
  {
    key: "G",
    name: "Gwenaëlle Dubrossard",
    email: "gwenaelle@dubrossard.example",
    place: "Namur, BE",
    timeZone: "Europe/Brussels",
    roles: [{ role: "composer", library: "OA", deals: nonExclusive }],
    ipi: "99900000746",
    unrecoupedAdvanceMinor: 0,
    note: "Jazz and accordion; re-records own works.",
  },
  {
    key: "H",
    name: "Hikaru Westenvelt",
    email: "hikaru@westenvelt.example",
    place: "Toronto, CA",
    timeZone: "America/Toronto",
    roles: [{ role: "composer", library: "BC", deals: exclusive }],
    ipi: "99900000844",
    unrecoupedAdvanceMinor: 0,
    note: "Trailer and hybrid; declares assistive tools for sound design.",
  },
];

/** Signed up by themselves; they deliver to a named library. */
export const otherUploaders: readonly PersonRow[] = [
  {
    key: "rufus",
    name: "Rufus Stannage-Pell",
    email: "rufus@stannagepell.example",
    place: "Bristol, UK",
    timeZone: "Europe/London",
    roles: [
      { role: "composer", library: "SM", deals: [] },
      { role: "composer", library: "BC", deals: [] },
      { role: "composer", library: "OA", deals: [] },
    ],
    ipi: null,
    note: "Delivers other people's recordings.",
  },
  {
    key: "h-westen",
    name: "H. Westen",
    email: "h.westen@quickpost.example",
    place: "Toronto, CA",
    timeZone: "America/Toronto",
    roles: [{ role: "composer", library: "BC", deals: [] }],
    ipi: null,
    note: "Gives a name close to H's; identity not established.",
  },
  {
    key: "tamsin",
    name: "Tamsin Wolstrop",
    email: "tamsin@wolstrop.example",
    place: "Leeds, UK",
    timeZone: "Europe/London",
    roles: [
      { role: "composer", library: "SM", deals: [] },
      { role: "composer", library: "BC", deals: [] },
    ],
    ipi: null,
    note: "Honest newcomer who samples without knowing the rules.",
  },
  {
    key: "ilse",
    name: "Ilse Corrigan-Bey",
    email: "ilse@corriganbey.example",
    place: "Cork, IE",
    timeZone: "Europe/Dublin",
    roles: [
      { role: "composer", library: "SM", deals: [] },
      { role: "composer", library: "OA", deals: [] },
    ],
    ipi: null,
    note: "Honest guitarist who covers what she hears.",
  },
];

export const libraryPeople: readonly PersonRow[] = [
  {
    key: "morag",
    name: "Morag Ettrick-Sloane",
    email: "morag@saltmarrow.example",
    place: "Leith, UK",
    timeZone: "Europe/London",
    roles: [{ role: "owner", library: "SM" }],
    ipi: null,
    note: "",
  },
  {
    key: "ruan",
    name: "Ruan Tessaly",
    email: "ruan@saltmarrow.example",
    place: "Leith, UK",
    timeZone: "Europe/London",
    roles: [
      { role: "moderator", library: "SM" },
      { role: "moderator", library: null },
    ],
    ipi: null,
    note: "Also a moderator of the marketplace.",
  },
  {
    key: "ingrid",
    name: "Ingrid Palmqvist-Abara",
    email: "ingrid@saltmarrow.example",
    place: "Leith, UK",
    timeZone: "Europe/London",
    roles: [{ role: "moderator", library: "SM" }],
    ipi: null,
    note: "Cousin of C; may not decide about her.",
  },
  {
    key: "desmond",
    name: "Desmond Orlafay",
    email: "desmond@saltmarrow.example",
    place: "Leith, UK",
    timeZone: "Europe/London",
    roles: [
      { role: "accountant", library: "SM" },
      { role: "accountant", library: null },
    ],
    ipi: null,
    note: "Also an accountant of the marketplace.",
  },
  {
    key: "harriet",
    name: "Harriet Bellamy-Osei",
    email: "harriet@brindlecote.example",
    place: "Hamilton, CA",
    timeZone: "America/Toronto",
    roles: [{ role: "owner", library: "BC" }],
    ipi: null,
    note: "",
  },
  {
    key: "callum",
    name: "Callum Drysdale-Roy",
    email: "callum@brindlecote.example",
    place: "Hamilton, CA",
    timeZone: "America/Toronto",
    roles: [{ role: "moderator", library: "BC" }],
    ipi: null,
    note: "",
  },
  {
    key: "winnifred",
    name: "Winnifred Takoda-Lane",
    email: "winnifred@brindlecote.example",
    place: "Hamilton, CA",
    timeZone: "America/Toronto",
    roles: [{ role: "accountant", library: "BC" }],
    ipi: null,
    note: "",
  },
  {
    key: "odile",
    name: "Odile Varenbeke",
    email: "odile@ostravelle.example",
    place: "Namur, BE",
    timeZone: "Europe/Brussels",
    roles: [{ role: "owner", library: "OA" }],
    ipi: null,
    note: "Reads every statement.",
  },
  {
    key: "lucien",
    name: "Lucien Hautecoeur-Diallo",
    email: "lucien@ostravelle.example",
    place: "Namur, BE",
    timeZone: "Europe/Brussels",
    roles: [{ role: "moderator", library: "OA" }],
    ipi: null,
    note: "",
  },
  {
    key: "margaux",
    name: "Margaux Pellerin-Voss",
    email: "margaux@ostravelle.example",
    place: "Namur, BE",
    timeZone: "Europe/Brussels",
    roles: [{ role: "accountant", library: "OA" }],
    ipi: null,
    note: "",
  },
];

export const marketplacePeople: readonly PersonRow[] = [
  {
    key: "solveig",
    name: "Solveig Anand-Prewitt",
    email: "solveig@sedgewren.example",
    place: "London, UK",
    timeZone: "Europe/London",
    roles: [{ role: "moderator", library: null }],
    ipi: null,
    note: "",
  },
  {
    key: "mirela",
    name: "Mirela Castellane-Ode",
    email: "mirela@sedgewren.example",
    place: "London, UK",
    timeZone: "Europe/London",
    roles: [{ role: "accountant", library: null }],
    ipi: null,
    note: "",
  },
  {
    key: "otto",
    name: "Otto Vinterhagen",
    email: "otto@sedgewren.example",
    place: "London, UK",
    timeZone: "Europe/London",
    roles: [{ role: "admin" }],
    ipi: null,
    note: "",
  },
];

export const buyerPeople: readonly PersonRow[] = [
  {
    key: "noor",
    name: "Noor Haldane-Ferris",
    email: "noor@thistlemoth.example",
    place: "Glasgow, UK",
    timeZone: "Europe/London",
    roles: [{ role: "buyer", company: "thistlemoth", seat: "propose", does: "music supervisor" }],
    ipi: null,
    note: "",
  },
  {
    key: "tobias",
    name: "Tobias Ekwensi-Brandt",
    email: "tobias@thistlemoth.example",
    place: "Glasgow, UK",
    timeZone: "Europe/London",
    roles: [{ role: "buyer", company: "thistlemoth", seat: "propose", does: "picture editor" }],
    ipi: null,
    note: "",
  },
  {
    key: "beatrix",
    name: "Beatrix Lomond-Achebe",
    email: "beatrix@thistlemoth.example",
    place: "Glasgow, UK",
    timeZone: "Europe/London",
    roles: [{ role: "buyer", company: "thistlemoth", seat: "approve", does: "approver" }],
    ipi: null,
    note: "",
  },
  {
    key: "petronella",
    name: "Petronella Voigt-Adeyemi",
    email: "petronella@skerrymore.example",
    place: "Edinburgh, UK",
    timeZone: "Europe/London",
    roles: [{ role: "client-guest", company: "skerrymore", does: "commissioner" }],
    ipi: null,
    note: "Uses a share link, no account.",
  },
  {
    key: "ansel",
    name: "Ansel Borowiak-Finn",
    email: "ansel@skerrymore.example",
    place: "Edinburgh, UK",
    timeZone: "Europe/London",
    roles: [{ role: "client-guest", company: "skerrymore", does: "delivery clerk" }],
    ipi: null,
    note: "A stranger to the site: checks records only.",
  },
  {
    key: "yevgenia",
    name: "Yevgenia Sallow",
    email: "yevgenia@plumbferrule.example",
    place: "Manchester, UK",
    timeZone: "Europe/London",
    roles: [{ role: "buyer", company: "plumb-ferrule", seat: "approve", does: "producer" }],
    ipi: null,
    note: "",
  },
  {
    key: "lorne",
    name: "Lorne Abernathy-Diaz",
    email: "lorne@longfootbridge.example",
    place: "Belfast, UK",
    timeZone: "Europe/London",
    roles: [{ role: "buyer", company: "lorne", seat: "approve", does: "podcaster" }],
    ipi: null,
    note: "",
  },
  {
    key: "ysolde",
    name: "Ysolde Farrant-Kim",
    email: "ysolde@quillbeck.example",
    place: "Whitby, UK",
    timeZone: "Europe/London",
    roles: [{ role: "buyer", company: "quillbeck", seat: "approve", does: "approver" }],
    ipi: null,
    note: "",
  },
];

/** They have no account: they wrote through the public form. */
export const reporters: readonly {
  readonly key: string;
  readonly name: string;
  readonly email: string;
  readonly note: string;
}[] = [
  {
    key: "marisol",
    name: "Marisol Quenby-Achterberg",
    email: "marisol@quenby-achterberg.example",
    note: "Songwriter; reported RW-01.",
  },
  {
    key: "tern-anvil",
    name: "Tern & Anvil",
    email: "rights@ternandanvil.example",
    note: "Label; reported RW-02.",
  },
  {
    key: "cato",
    name: "Cato Brimble-Voss",
    email: "cato@brimblevoss.example",
    note: "Nine notices in four months, seven unfounded; warned.",
  },
  {
    key: "lindqvist-roe-estate",
    name: "Estate of Agathe Lindqvist-Roe",
    email: "estate@lindqvistroe.example",
    note: "Reported RW-04.",
  },
];

export const people: readonly PersonRow[] = [
  ...composers,
  ...otherUploaders,
  ...libraryPeople,
  ...marketplacePeople,
  ...buyerPeople,
];
