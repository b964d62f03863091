import "./globals.css";
import type { Metadata, Viewport } from "next";
import { headers } from "next/headers";
import { NuqsAdapter } from "nuqs/adapters/next/app";
import type { ReactNode } from "react";
import { chooseRole } from "@/app/(account)/actions";
import { QueryProvider } from "@/components/lists/query-provider";
import { PlayerProvider } from "@/components/player/player-provider";
import { Footer } from "@/components/shell/footer";
import { Header, SkipLink } from "@/components/shell/header";
import { HeadingFocus } from "@/components/shell/heading-focus";
import { FOOTER_LINKS, navFor } from "@/components/shell/nav";
import { fmt } from "@/components/ui/format";
import { UiProvider } from "@/components/ui/ui-provider";
import { countListed } from "@/lib/catalogue";
import { isMarketplace } from "@/lib/kernel/actor";
import { businessNow } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { type Viewer, viewer } from "@/lib/web";

export const metadata: Metadata = {
  title: { default: "Sedgewren", template: "%s · Sedgewren" },
  description:
    "Production music from independent libraries: every recording screened before it is listed, every licence a record that can be checked.",
};

export const viewport: Viewport = { width: "device-width", initialScale: 1, colorScheme: "light dark" };

export default async function RootLayout({ children }: { children: ReactNode }) {
  const nonce = (await headers()).get("x-nonce") ?? undefined;
  const who = await viewer();
  const isDemo = env.SEDGEWREN_MODE === "demo";
  const clock = isDemo ? await demonstrationWords(who) : fmt.dateTime(businessNow(), "UTC");
  return (
    <html lang="en-GB">
      <body className="flex min-h-dvh flex-col">
        <UiProvider nonce={nonce}>
          <NuqsAdapter>
            <QueryProvider>
              <PlayerProvider>
                <SkipLink />
                <HeadingFocus />
                <Header
                  items={navFor(who.actor.kind, isMarketplace(who.actor))}
                  person={signedIn(who)}
                  switchRole={chooseRole}
                />
                {children}
                <Footer
                  clock={clock}
                  demonstration={
                    isDemo ? "Demonstration. Every name, work and price here is invented." : undefined
                  }
                  links={FOOTER_LINKS}
                />
              </PlayerProvider>
            </QueryProvider>
          </NuqsAdapter>
        </UiProvider>
      </body>
    </html>
  );
}

/** What the foot of every page of a demonstration says: its clock, and how much of it is in. */
async function demonstrationWords(who: Viewer): Promise<string> {
  const { cues } = await countListed(who.actor, {});
  const growing =
    cues < env.DEMO_CUES ? ` ${cues} of its ${env.DEMO_CUES} cues are in; the rest is being screened.` : "";
  return `Its clock says ${fmt.dateTime(businessNow(), "UTC")}; it started on 18 May 2026 and runs on.${growing}`;
}

function signedIn(who: Viewer) {
  if (!who.person) return undefined;
  const current = who.roles.find((role) => role.current);
  return {
    name: who.person.name,
    role: current?.label ?? "no role yet",
    roleShort: current?.kind ?? "signed in",
    roles: who.roles.map((role) => ({ key: role.membershipId, words: role.label, isCurrent: role.current })),
    links: [
      { href: "/account", words: "Your account" },
      { href: "/sign-out", words: "Sign out" },
    ],
  };
}
