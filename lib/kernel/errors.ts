export type ErrorCode =
  | "not_found"
  | "forbidden"
  | "unauthenticated"
  | "invalid"
  | "conflict"
  | "limit"
  | "precondition";

/** An expected failure: its message is safe to show, and says what happened, what is kept and what to do next. */
export class Expected extends Error {
  constructor(
    readonly code: ErrorCode,
    message: string,
    /** Messages by form field path ("writers.0.ipi"). */
    readonly fields: Readonly<Record<string, string>> = {},
    options?: ErrorOptions,
  ) {
    super(message, options);
    this.name = new.target.name;
  }
}

/** Not there and not yours to see answer alike. */
export class NotFound extends Expected {
  constructor(what = "There is nothing at this address, or it is not yours to see.") {
    super("not_found", what);
  }
}

/** You may see it, but not do this to it. */
export class Forbidden extends Expected {
  constructor(message = "Your role does not allow this.") {
    super("forbidden", message);
  }
}

export class Unauthenticated extends Expected {
  constructor(message = "Please sign in first.") {
    super("unauthenticated", message);
  }
}

export class Invalid extends Expected {
  constructor(message: string, fields: Readonly<Record<string, string>> = {}) {
    super("invalid", message, fields);
  }
}

/** Somebody else was first, or the same key came with other content. */
export class Conflict extends Expected {
  constructor(message: string, options?: ErrorOptions) {
    super("conflict", message, {}, options);
  }
}

/** Too many, too large or too often. */
export class Limit extends Expected {
  constructor(message: string) {
    super("limit", message);
  }
}

/** The thing is not in a state in which this can be done. */
export class Precondition extends Expected {
  constructor(message: string) {
    super("precondition", message);
  }
}

/** An assertion of ours failed: never shown, always logged. */
export class Bug extends Error {
  override name = "Bug";
}

export function assert(condition: unknown, message: string): asserts condition {
  if (!condition) throw new Bug(message);
}

export function never(value: never): never {
  throw new Bug(`unexpected value ${JSON.stringify(value)}`);
}
