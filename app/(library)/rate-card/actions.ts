"use server";

import { setRateCard as setRateCardVerb } from "@/lib/licensing";
import { action } from "@/lib/web";

export const setRateCard = action(setRateCardVerb, { refresh: () => ["/rate-card"] });
