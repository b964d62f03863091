"use server";

import { confirmPayoutRun, preparePayoutRun, releasePayoutRun, startPayee } from "@/lib/ledger";
import { action } from "@/lib/web";

const refresh = () => ["/payouts", "/sales"];

export const beginPayee = action(startPayee, { refresh: () => ["/payouts", "/statements"] });
export const prepareRun = action(preparePayoutRun, { refresh });
export const releaseRun = action(releasePayoutRun, { refresh });
export const confirmRun = action(confirmPayoutRun, { refresh });
