import "server-only";
import { headers } from "next/headers";

/** The address a request came from, for limits only. One proxy in front at most, which sets the header itself. */
export async function clientAddress(): Promise<string> {
  const forwarded = (await headers()).get("x-forwarded-for");
  return forwarded?.split(",").at(-1)?.trim() ?? "local";
}
