"use client";

import { useRouter } from "next/navigation";
import { useEffect } from "react";

/** Reads the page again every few seconds while something on it is still being done. */
export function Watch({ everyS = 3 }: { everyS?: number }) {
  const router = useRouter();
  useEffect(() => {
    const timer = setInterval(() => router.refresh(), everyS * 1000);
    return () => clearInterval(timer);
  }, [router, everyS]);
  return null;
}
