"use client";

import Link from "next/link";
import { usePathname } from "next/navigation";
import { Button } from "@/components/ui/button";
import { Menu, type MenuGroup } from "@/components/ui/menu";

export interface NavItem {
  href: string;
  words: string;
  /** Other addresses that belong to this area: "/cues". */
  also?: readonly string[];
}

function isWithin(pathname: string, item: NavItem): boolean {
  return [item.href, ...(item.also ?? [])].some(
    (href) => pathname === href || (href !== "/" && pathname.startsWith(`${href}/`)),
  );
}

/** The areas of the site, in a row. */
export function NavLinks({ items }: { items: readonly NavItem[] }) {
  const pathname = usePathname();
  return (
    <ul className="flex gap-x-[26px]">
      {items.map((item) => {
        const isCurrent = isWithin(pathname, item);
        return (
          <li key={item.href}>
            <Link
              aria-current={isCurrent ? "page" : undefined}
              className="block border-y-[1.5px] border-transparent py-1.5 hover:border-b-ink-soft aria-[current]:border-b-ink aria-[current]:font-strong"
              href={item.href}
            >
              {item.words}
            </Link>
          </li>
        );
      })}
    </ul>
  );
}

export interface PersonRole {
  key: string;
  /** "supervisor at Thistlemoth Pictures" */
  words: string;
  isCurrent: boolean;
}

export interface SignedIn {
  name: string;
  /** The role in use, as words. */
  role: string;
  /** One word for a phone: "composer". */
  roleShort: string;
  /** Every role this person holds, the one in use among them. */
  roles: readonly PersonRole[];
  /** Account, people, sign out. */
  links: readonly { href: string; words: string }[];
}

/** The server action that chooses a role; it leads to that role's first page by itself. */
export type SwitchRole = (input: { membershipId: string }) => Promise<unknown>;

interface PersonMenuProps {
  person: SignedIn;
  switchRole?: SwitchRole | undefined;
}

function personGroups({ person, switchRole }: PersonMenuProps): MenuGroup[] {
  const roles: MenuGroup[] =
    person.roles.length > 1
      ? [
          {
            key: "roles",
            head: "The role in use",
            entries: person.roles.map((role) => ({
              key: role.key,
              words: role.words,
              isCurrent: role.isCurrent,
              onPick: () => {
                if (!role.isCurrent) void switchRole?.({ membershipId: role.key });
              },
            })),
          },
        ]
      : [];
  const links = { key: "links", entries: person.links.map((link) => ({ key: link.href, ...link })) };
  return links.entries.length > 0 ? [...roles, links] : roles;
}

/** Who is signed in, in which role; the other roles behind it. */
export function PersonMenu(props: PersonMenuProps) {
  const { person } = props;
  return (
    <Menu
      groups={personGroups(props)}
      trigger={
        <button
          className="min-h-[34px] max-w-full cursor-pointer truncate rounded-plain border border-ink-soft px-3 py-1 hover:border-ink"
          type="button"
        >
          {person.name}, {person.role}
        </button>
      }
    />
  );
}

interface PhoneMenuProps {
  items: readonly NavItem[];
  person?: SignedIn | undefined;
  switchRole?: SwitchRole | undefined;
  signInHref: string;
}

/** The whole header behind one word, on a phone. */
export function PhoneMenu({ items, person, switchRole, signInHref }: PhoneMenuProps) {
  const pathname = usePathname();
  const areas: MenuGroup = {
    key: "areas",
    entries: items.map((item) => ({
      key: item.href,
      href: item.href,
      words: item.words,
      isCurrent: isWithin(pathname, item),
    })),
  };
  const rest: MenuGroup[] = person
    ? [
        { key: "who", head: `${person.name}, ${person.role}`, entries: [] },
        ...personGroups({ person, switchRole }),
      ]
    : [{ key: "sign-in", entries: [{ key: "sign-in", href: signInHref, words: "Sign in" }] }];
  return <Menu groups={[areas, ...rest]} trigger={<Button kind="quiet">Menu</Button>} />;
}
