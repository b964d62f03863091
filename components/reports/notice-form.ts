import type { FieldErrors, UseFormReturn } from "react-hook-form";
import type { SubmitNotice, SubmitNoticeInput } from "@/lib/reports/schemas";

export type NoticeForm = UseFormReturn<SubmitNoticeInput, unknown, SubmitNotice>;

/** A report with nothing in it yet; what must be chosen is left out. */
export const EMPTY_NOTICE: Partial<SubmitNoticeInput> = {
  name: "",
  email: "",
  countryCode: "",
  postal: "",
  workTitle: "",
  writers: "",
  owner: "",
  isrc: "",
  iswc: "",
  release: "",
  where: "",
  fromS: null,
  toS: null,
  grounds: [],
  why: "",
  hasRecording: false,
  signedName: "",
};

export type NoticeField = keyof SubmitNoticeInput;
export type ErrorAt = (name: NoticeField) => string | undefined;

export interface StepProps {
  form: NoticeForm;
  errorAt: ErrorAt;
}

export function messageOf(errors: FieldErrors<SubmitNoticeInput>, name: NoticeField): string | undefined {
  const error = errors[name];
  return typeof error?.message === "string" ? error.message : undefined;
}

/** "1:05" → 65, "20" → 20, "" → null; anything else is not a number. */
export function secondsOf(typed: string): number | null {
  const text = typed.trim();
  if (text === "") return null;
  if (!/^\d{1,3}(:\d{1,2}){0,2}$/.test(text)) return Number.NaN;
  return text.split(":").reduce((total, part) => total * 60 + Number(part), 0);
}

export const clockOf = (seconds: number): string =>
  `${Math.floor(seconds / 60)}:${String(Math.floor(seconds % 60)).padStart(2, "0")}`;
