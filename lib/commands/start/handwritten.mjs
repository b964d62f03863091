const BREAKPOINT = "--> statement-breakpoint";

/**
 * One migration of all hand-written files, with drizzle's breakpoint between files. Within a file its
 * author sets the breakpoints; a trailing one is dropped, for an empty statement is an error.
 */
export function joinStatements(texts) {
  const bodies = texts.map((text) =>
    text
      .trim()
      .replace(/(?:-->\s*statement-breakpoint\s*)+$/, "")
      .trim(),
  );
  return `${bodies.filter((body) => body !== "").join(`\n${BREAKPOINT}\n`)}\n`;
}
