import { readHealth } from "@/lib/health";
import { ANONYMOUS } from "@/lib/kernel/actor";
import { route } from "@/lib/web";

export const GET = route({
  handle: async () => {
    const health = await readHealth(ANONYMOUS, {});
    return Response.json(health, { status: health.ok ? 200 : 503, headers: { "cache-control": "no-store" } });
  },
});
