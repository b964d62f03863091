const MARKS: readonly (readonly [type: string, at: number, mark: string])[] = [
  ["audio/wav", 8, "WAVE"],
  ["audio/flac", 0, "fLaC"],
  ["audio/aiff", 0, "FORM"],
  ["audio/ogg", 0, "OggS"],
  ["audio/mp4", 4, "ftyp"],
  ["audio/mpeg", 0, "ID3"],
];

/** What the first bytes say; the type that a browser claimed with an upload is not kept. */
export function soundType(head: Uint8Array): string {
  const text = Buffer.from(head).toString("latin1");
  const found = MARKS.find(([, at, mark]) => text.startsWith(mark, at));
  if (found) return found[0];
  return head[0] === 0xff && ((head[1] ?? 0) & 0xe0) === 0xe0 ? "audio/mpeg" : "application/octet-stream";
}
