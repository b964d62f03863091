"use client";

import { usePathname } from "next/navigation";
import { useEffect, useRef } from "react";

/** After a link inside the site the page's own heading is what is read next, as it is after a full load. */
export function HeadingFocus() {
  const pathname = usePathname();
  const before = useRef(pathname);
  useEffect(() => {
    if (before.current === pathname) return;
    before.current = pathname;
    const heading = document.querySelector<HTMLElement>("main h1");
    if (!heading) return;
    heading.tabIndex = -1;
    heading.focus({ preventScroll: true });
  }, [pathname]);
  return null;
}
