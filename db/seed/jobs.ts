import { defineHandlers } from "@/lib/jobs";
import { bring, seeThrough } from "./bring";

/** The demonstration's own jobs; the worker takes them on in demo mode only. */
export const demonstrationHandlers = defineHandlers({
  "demo.bring": { heavy: true, timeoutS: 1200, handle: ({ item }) => bring(item) },
  "demo.seeThrough": {
    timeoutS: 120,
    handle: ({ item, deliveryId, turn }) => seeThrough(item, deliveryId, turn),
  },
});
