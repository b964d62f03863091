/*
 * The product's worker, loaded and held at its door until a line arrives, so that a test need not wait for modules between
 * two kills. What runs then is lib/commands/worker.ts itself.
 */
import "@/db/seed/jobs";
import "@/lib/catalogue/jobs";
import "@/lib/deliveries/jobs";
import "@/lib/ledger/jobs";
import "@/lib/licensing/jobs";
import "@/lib/mail/jobs";
import "@/lib/reports/jobs";
import "@/lib/review/jobs";
import "@/lib/screening/jobs";
import { once } from "node:events";

process.stdout.write("loaded\n");
await once(process.stdin, "data");
process.stdin.destroy();
await import("@/lib/commands/worker");
