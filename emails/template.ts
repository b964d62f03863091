import type { ReactElement } from "react";
import type { z } from "zod";

/** What every mail is told beside its own props. */
export interface Frame {
  isDemonstration: boolean;
  siteUrl: string;
}

export interface MailTemplate<S extends z.ZodType> {
  props: S;
  subject: (props: z.output<S>) => string;
  body: (props: z.output<S>, frame: Frame) => ReactElement;
}

export function defineTemplate<S extends z.ZodType>(template: MailTemplate<S>): MailTemplate<S> {
  return template;
}
