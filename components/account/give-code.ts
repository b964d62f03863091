"use client";

import type { Session } from "next-auth";
import { getCsrfToken } from "next-auth/react";

/**
 * Hands a code to next-auth's session update, because only that may write the session's cookie. Answers the reason of a
 * refusal, or null.
 */
export async function giveCode(code: string): Promise<string | null> {
  const csrfToken = await getCsrfToken();
  const response = await fetch("/api/auth/session", {
    method: "POST",
    headers: { "content-type": "application/json" },
    body: JSON.stringify({ csrfToken, data: { secondFactorCode: code } }),
  });
  const session = (await response.json().catch(() => null)) as Partial<Session> | null;
  if (!session?.sedgewren) return "You are signed out. Sign in again first.";
  return session.secondFactorProblem ?? null;
}
