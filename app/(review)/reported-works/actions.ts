"use server";

import { judgeNotice, setEvidenceLevel, takeNotice } from "@/lib/reports";
import { action } from "@/lib/web";

const pages = ({ input }: { input: { noticeId: string } }) => [
  "/reported-works",
  `/reported-works/${input.noticeId}`,
];

export const take = action(takeNotice, { refresh: pages });
export const judge = action(judgeNotice, { refresh: pages });
export const setLevel = action(setEvidenceLevel, { refresh: () => ["/reported-works"] });
