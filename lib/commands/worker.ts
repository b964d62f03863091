import { closeDb } from "@/db/client";
import { demonstrationHandlers } from "@/db/seed/jobs";
import { closeDemonstration } from "@/db/seed/masters";
import { catalogueHandlers } from "@/lib/catalogue/jobs";
import { closeRendering } from "@/lib/catalogue/rendering/render-recording";
import { deliveriesHandlers } from "@/lib/deliveries/jobs";
import { closeMeasuring } from "@/lib/deliveries/measuring/measure-version";
import { type Handlers, runWorker } from "@/lib/jobs";
import { env } from "@/lib/kernel/env";
import { log } from "@/lib/kernel/log";
import { ledgerHandlers } from "@/lib/ledger/jobs";
import { licensingHandlers } from "@/lib/licensing/jobs";
import { mailHandlers } from "@/lib/mail/jobs";
import { reportsHandlers } from "@/lib/reports/jobs";
import { reviewHandlers } from "@/lib/review/jobs";
import { closeScreeningEngine } from "@/lib/screening/engine/engine";
import { screeningHandlers } from "@/lib/screening/jobs";
import { removeLeftovers } from "@/lib/uploads";
import { enqueueSlots } from "./slots";

/** Every job by the room that handles it. */
export const handlers: Handlers = {
  ...mailHandlers,
  ...screeningHandlers,
  ...deliveriesHandlers,
  ...catalogueHandlers,
  ...reviewHandlers,
  ...licensingHandlers,
  ...ledgerHandlers,
  ...reportsHandlers,
  ...(env.SEDGEWREN_MODE === "demo" ? demonstrationHandlers : {}),
};

const stop = new AbortController();
for (const signal of ["SIGTERM", "SIGINT"] as const) process.on(signal, () => stop.abort());

const leftovers = await removeLeftovers();
if (leftovers > 0) log.info({ leftovers }, "what killed workers left on the disk is removed");
log.info("the worker is ready");
await runWorker({ handlers, signal: stop.signal, onTick: enqueueSlots });
await Promise.allSettled([closeScreeningEngine(), closeMeasuring(), closeRendering(), closeDemonstration()]);
await closeDb();
