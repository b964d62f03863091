import { randomUUID } from "node:crypto";
import { type ErrorCode, Expected } from "@/lib/kernel/errors";
import { log, requestId } from "@/lib/kernel/log";

export type Failure = {
  ok: false;
  code: ErrorCode | "unexpected";
  message: string;
  fields: Record<string, string>;
};

/** What a person is told of an error. The cause of an unexpected one is logged under the id that is shown. */
export function failureOf(error: unknown, doing: string): Failure {
  if (error instanceof Expected)
    return { ok: false, code: error.code, message: error.message, fields: { ...error.fields } };
  const reference = requestId() ?? randomUUID().slice(0, 8);
  log.error(
    {
      doing,
      reference,
      error: error instanceof Error ? error.stack : String(error),
      cause: error instanceof Error ? String(error.cause ?? "") : "",
    },
    "unexpected error",
  );
  return {
    ok: false,
    code: "unexpected",
    message: `Something went wrong on our side. Nothing was changed; please try again. If it happens again, tell us the number ${reference}.`,
    fields: {},
  };
}
