import type { ReactNode } from "react";
import { TextLink } from "@/components/ui/button";
import { KeysHelp } from "@/components/ui/keys-help";

interface FooterProps {
  /** "It is Monday 18 May 2026, 09:14 UTC in the demonstration." */
  clock: string;
  /** "Demonstration", and what that means, where it is one. */
  demonstration?: ReactNode;
  /** Report a work, check a licence, honesty; only screens that exist. */
  links: readonly { href: string; words: string }[];
}

export function Footer({ clock, demonstration, links }: FooterProps) {
  return (
    <footer className="border-t border-ink px-4 py-4 text-small sm:px-6 lg:px-10">
      <div className="flex flex-wrap items-baseline justify-between gap-x-8 gap-y-2">
        <p className="max-w-measure text-ink-soft">
          {demonstration && <span className="font-strong text-ink">{demonstration}</span>}
          {demonstration && " "}
          {clock}
        </p>
        <ul className="flex flex-wrap gap-x-5 gap-y-1">
          {links.map((link) => (
            <li key={link.href}>
              <TextLink href={link.href}>{link.words}</TextLink>
            </li>
          ))}
          <li>
            <KeysHelp />
          </li>
        </ul>
      </div>
    </footer>
  );
}
