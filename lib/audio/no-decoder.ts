/** Stands in at build time for a decoder that audio-decode names but does not depend on. */
export function decoder(): never {
  throw new Error("No decoder for this format");
}

export default decoder;
