import { createSerializer } from "nuqs/server";
import type { Brief } from "@/lib/catalogue/schemas";
import { briefParams, valuesOf } from "./brief-params";

const serialise = createSerializer(briefParams);

/** The brief as the search part of an address, without "?": the same brief always gives the same text. */
export const briefQuery = (brief: Brief): string => serialise(valuesOf(brief)).replace(/^\?/, "");
