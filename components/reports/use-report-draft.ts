"use client";

import { useCallback, useEffect, useRef, useState } from "react";
import type { SubmitNoticeInput } from "@/lib/reports/schemas";
import { EMPTY_NOTICE, type NoticeForm } from "./notice-form";

const PLACE = "sedgewren.report";
const PAUSE_MS = 400;

function kept(): Partial<SubmitNoticeInput> | null {
  try {
    return JSON.parse(localStorage.getItem(PLACE) ?? "null") as Partial<SubmitNoticeInput> | null;
  } catch {
    return null;
  }
}

/** Keeps what is typed in this browser and nowhere else, until it is sent or thrown away. */
export function useReportDraft(form: NoticeForm, start: Partial<SubmitNoticeInput>) {
  const [isKept, setKept] = useState(false);
  const begin = useRef(start);
  const timer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);

  useEffect(() => {
    const before = kept();
    if (before) {
      form.reset({ ...EMPTY_NOTICE, ...before, ...begin.current });
      setKept(true);
    }
    const { unsubscribe } = form.watch((values) => {
      clearTimeout(timer.current);
      timer.current = setTimeout(() => {
        localStorage.setItem(PLACE, JSON.stringify(values));
        setKept(true);
      }, PAUSE_MS);
    });
    return () => {
      clearTimeout(timer.current);
      unsubscribe();
    };
  }, [form]);

  const forget = useCallback(() => {
    clearTimeout(timer.current);
    localStorage.removeItem(PLACE);
    setKept(false);
  }, []);

  return { isKept, forget };
}
