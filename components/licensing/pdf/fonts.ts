import { join } from "node:path";
import { Font } from "@react-pdf/renderer";

const folder = (family: string) => join(process.cwd(), "node_modules", "@fontsource", family, "files");
const file = (family: string, subset: string, weight: number, style: string) =>
  join(folder(family), `${family}-${subset}-${weight}-${style}.woff`);

/** A family and, for letters beyond Latin 1, its extension: tried in this order for each letter. */
export const SANS = ["Commissioner", "Commissioner Extended"];
export const WORK = ["Piazzolla", "Piazzolla Extended"];

const LONG_WORD = 24;
let registered = false;

/** Embeds the static files of the same typefaces as the site; no request leaves the server. */
export function registerFonts(): void {
  if (registered) return;
  registered = true;
  for (const [name, subset] of [
    ["Commissioner", "latin"],
    ["Commissioner Extended", "latin-ext"],
  ] as const)
    Font.register({
      family: name,
      fonts: [400, 600].map((fontWeight) => ({
        src: file("commissioner", subset, fontWeight, "normal"),
        fontWeight,
      })),
    });
  for (const [name, subset] of [
    ["Piazzolla", "latin"],
    ["Piazzolla Extended", "latin-ext"],
  ] as const)
    Font.register({
      family: name,
      fonts: [{ src: file("piazzolla", subset, 500, "italic"), fontWeight: 500, fontStyle: "italic" }],
    });
  // Words stay whole; hashes may be broken anywhere.
  Font.registerHyphenationCallback((word) =>
    word.length > LONG_WORD ? (word.match(/.{1,8}/gu) ?? [word]) : [word],
  );
}
