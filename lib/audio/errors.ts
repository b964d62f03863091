/** Every refusal of this room. `code` is stable and safe to store; the message is plain English. */
export type AudioErrorCode =
  | "not-audio"
  | "unsupported"
  | "truncated"
  | "damaged"
  | "too-long"
  | "too-large"
  | "encode-failed";

export class AudioError extends Error {
  readonly code: AudioErrorCode;
  constructor(code: AudioErrorCode, message: string, options?: { cause?: unknown }) {
    super(message, options);
    this.code = code;
    this.name = new.target.name;
  }
}

/** The bytes are not audio. `found` says what they are, so that the person can see the mistake. */
export class NotAudio extends AudioError {
  readonly found: string;
  constructor(found: string) {
    super(
      "not-audio",
      `This file is ${found}, not audio. Accepted are WAV, Broadcast Wave, AIFF and FLAC; MP3, AAC, Ogg and Opus can be read but are no masters.`,
    );
    this.found = found;
  }
}

/** Audio, but in a coding that this room does not read. */
export class UnsupportedAudio extends AudioError {
  constructor(what: string) {
    super("unsupported", `This file holds ${what}, which cannot be read here.`);
  }
}

/** The file ends before its own header says it should. `declaredS` is null where no length is declared. */
export class Truncated extends AudioError {
  readonly readableS: number;
  readonly declaredS: number | null;
  constructor(readableS: number, declaredS: number | null) {
    const of = declaredS === null ? "" : ` of ${declaredS.toFixed(2)} s`;
    super("truncated", `This file is cut short: ${readableS.toFixed(2)} s${of} can be read.`);
    this.readableS = readableS;
    this.declaredS = declaredS;
  }
}

/** All bytes are there, but some do not decode. */
export class Damaged extends AudioError {
  readonly readableS: number;
  readonly declaredS: number | null;
  constructor(readableS: number, declaredS: number | null, what: string) {
    const of = declaredS === null ? "" : ` of ${declaredS.toFixed(2)} s`;
    super("damaged", `This file is damaged (${what}): ${readableS.toFixed(2)} s${of} can be read.`);
    this.readableS = readableS;
    this.declaredS = declaredS;
  }
}

export class TooLong extends AudioError {
  readonly durationS: number;
  readonly limitS: number;
  constructor(durationS: number, limitS: number) {
    super("too-long", `This file lasts ${Math.round(durationS)} s or more; the limit is ${limitS} s.`);
    this.durationS = durationS;
    this.limitS = limitS;
  }
}

export class TooLarge extends AudioError {
  readonly sizeBytes: number;
  readonly limitBytes: number;
  constructor(sizeBytes: number, limitBytes: number) {
    super("too-large", `This file has ${sizeBytes} bytes; the limit is ${limitBytes} bytes.`);
    this.sizeBytes = sizeBytes;
    this.limitBytes = limitBytes;
  }
}

export class EncodeFailed extends AudioError {
  constructor(what: string, cause?: unknown) {
    super("encode-failed", what, cause === undefined ? undefined : { cause });
  }
}
