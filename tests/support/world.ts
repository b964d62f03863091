import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll } from "vitest";
import { startFiles } from "@/fixtures/services/files/files";
import { startMail } from "@/fixtures/services/mail/mail";
import { startPayments } from "@/fixtures/services/payments/payments";
import type { StandIn } from "@/fixtures/services/server";

export interface StandIns {
  files: StandIn;
  mail: StandIn;
  payments: StandIn;
  folder: string;
}

/** Starts the three hosted far ends for one test file, in this process, and points the environment at them. */
export async function startStandIns(): Promise<StandIns> {
  const folder = mkdtempSync(join(tmpdir(), "sedgewren-"));
  const token = process.env.UPLOADTHING_TOKEN ?? "";
  const files = await startFiles({
    port: 0,
    dataDir: join(folder, "services"),
    token,
    siteOrigins: ["http://127.0.0.1:3400"],
  });
  const mail = await startMail({
    port: 0,
    dataDir: join(folder, "services"),
    apiKey: process.env.RESEND_API_KEY ?? "",
  });
  const payments = await startPayments({
    port: 0,
    dataDir: join(folder, "services"),
    secretKey: process.env.STRIPE_SECRET_KEY ?? "",
    webhookSecret: process.env.STRIPE_WEBHOOK_SECRET ?? "",
    webhookUrl: "http://127.0.0.1:9/never",
  });
  const port = new URL(files.url).port;
  Object.assign(process.env, {
    MEDIA_DIR: join(folder, "media"),
    UPLOADTHING_INGEST_URL: files.url,
    UPLOADTHING_API_URL: files.url,
    UPLOADTHING_CALLBACK_URL: "http://127.0.0.1:3400/api/uploadthing",
    UPLOADTHING_UFS_HOST: `localhost:${port}`,
    UPLOADTHING_UFS_APP_ID_LOCATION: "path",
    RESEND_BASE_URL: mail.url,
    STRIPE_API_BASE: payments.url,
  });
  afterAll(async () => {
    for (const standIn of [files, mail, payments]) await standIn.close();
    rmSync(folder, { recursive: true, force: true });
  });
  return { files, mail, payments, folder };
}
