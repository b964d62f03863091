import { env } from "@/lib/kernel/env";
import { Forbidden } from "@/lib/kernel/errors";
import { getOwnProcessorAccount } from "@/lib/ledger";
import { onboardingLink } from "@/lib/payments";
import { route } from "@/lib/web";

/** On to the payment service's own form, where the payee gives bank and identity; it comes back to the page it left. */
export const GET = route({
  handle: async ({ actor }) => {
    if (actor.kind !== "owner" && actor.kind !== "accountant" && actor.kind !== "composer")
      throw new Forbidden();
    const accountId = await getOwnProcessorAccount(actor, {});
    const back = `${env.SITE_URL}${actor.kind === "composer" ? "/statements" : "/payouts"}`;
    const again = `${env.SITE_URL}/api/payees/onboarding`;
    const { url } = await onboardingLink({ accountId, returnUrl: back, refreshUrl: again });
    return new Response(null, { status: 303, headers: { location: url, "cache-control": "no-store" } });
  },
});
