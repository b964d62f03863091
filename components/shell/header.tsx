import Link from "next/link";
import { ButtonLink } from "@/components/ui/button";
import { MarkOfSedge } from "./mark-of-sedge";
import { type NavItem, NavLinks, PersonMenu, PhoneMenu, type SignedIn, type SwitchRole } from "./nav-links";

interface HeaderProps {
  items: readonly NavItem[];
  person?: SignedIn | undefined;
  /** The server action that chooses a role. */
  switchRole?: SwitchRole | undefined;
  signInHref?: string;
}

/** The first stop of the keyboard on every page. */
export function SkipLink() {
  return (
    <a
      className="link sr-only z-60 bg-page px-3 py-2 focus:not-sr-only focus:absolute focus:top-2 focus:left-2"
      href="#main"
    >
      Go to the main part
    </a>
  );
}

export function Header({ items, person, switchRole, signInHref = "/sign-in" }: HeaderProps) {
  return (
    <header className="flex min-h-[57px] items-center gap-x-6 border-b border-ink px-4 sm:px-6 lg:pr-7 lg:pl-10">
      <Link className="flex min-h-6 items-center gap-[9px] text-lead font-label tracking-[-0.003em]" href="/">
        <MarkOfSedge />
        Sedgewren
      </Link>
      <nav aria-label="Areas" className="ml-5 hidden shrink-0 whitespace-nowrap xl:block">
        <NavLinks items={items} />
      </nav>
      <div className="ml-auto hidden min-w-0 xl:block">
        {person ? (
          <PersonMenu person={person} switchRole={switchRole} />
        ) : (
          <ButtonLink href={signInHref} size="small">
            Sign in
          </ButtonLink>
        )}
      </div>
      <div className="ml-auto flex items-baseline gap-4 xl:hidden">
        {person && <span className="text-small text-ink-soft">{person.roleShort}</span>}
        <PhoneMenu items={items} person={person} signInHref={signInHref} switchRole={switchRole} />
      </div>
    </header>
  );
}
