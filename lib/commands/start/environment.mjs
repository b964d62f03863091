import { APP, databaseUrl, OWNER } from "./mariadb.mjs";

export const USUAL_PORTS = { site: 3400, files: 3410, payments: 3420, mail: 3430, database: 3307 };

const BUSINESS_CLOCK_START = "2026-05-18T09:00:00Z";

/** Everything that the product reads from its environment in demo mode, under the names it reads. */
export function demoEnvironment({ ports, secrets, mediaDir }) {
  const site = `http://127.0.0.1:${ports.site}`;
  const files = `http://127.0.0.1:${ports.files}`;
  const token = { apiKey: secrets.uploadthingApiKey, appId: secrets.uploadthingAppId, regions: ["lo1"] };
  return {
    SEDGEWREN_MODE: "demo",
    SITE_URL: site,
    DATABASE_URL: databaseUrl({ user: APP, password: secrets.appPassword, port: ports.database }),
    DATABASE_OWNER_URL: databaseUrl({ user: OWNER, password: secrets.ownerPassword, port: ports.database }),
    NEXTAUTH_URL: site,
    NEXTAUTH_SECRET: secrets.nextauthSecret,
    UPLOADTHING_TOKEN: Buffer.from(JSON.stringify(token)).toString("base64"),
    UPLOADTHING_INGEST_URL: files,
    UPLOADTHING_API_URL: files,
    UPLOADTHING_CALLBACK_URL: `${site}/api/uploadthing`,
    // The SDK speaks plain http only to a host whose name contains "local".
    UPLOADTHING_UFS_HOST: `localhost:${ports.files}`,
    UPLOADTHING_UFS_APP_ID_LOCATION: "path",
    UPLOADTHING_LOG_LEVEL: "Warning",
    UPLOADTHING_IS_DEV: "false",
    STRIPE_SECRET_KEY: secrets.stripeSecretKey,
    STRIPE_WEBHOOK_SECRET: secrets.stripeWebhookSecret,
    STRIPE_API_BASE: `http://127.0.0.1:${ports.payments}`,
    RESEND_API_KEY: secrets.resendApiKey,
    RESEND_BASE_URL: `http://127.0.0.1:${ports.mail}`,
    MAIL_FROM: "Sedgewren <post@sedgewren.example>",
    RECORD_SIGNING_SEED: secrets.recordSigningSeed,
    FIELD_KEY: secrets.fieldKey,
    BUSINESS_CLOCK_START,
    BUSINESS_CLOCK_ANCHOR: secrets.businessClockAnchor,
    MEDIA_DIR: mediaDir,
    TZ: "UTC",
    NEXT_TELEMETRY_DISABLED: "1",
  };
}

const PASSED_ON = [
  "PATH",
  "HOME",
  "USER",
  "LANG",
  "LC_ALL",
  "TERM",
  "TMPDIR",
  "CI",
  "FORCE_COLOR",
  "NO_COLOR",
  "LOG_LEVEL",
];

/** What a child gets: a few neutral variables of ours and the product's own, nothing else by accident. */
export function childEnvironment(values) {
  const passed = PASSED_ON.filter((name) => process.env[name] !== undefined).map((name) => [
    name,
    process.env[name],
  ]);
  return { ...Object.fromEntries(passed), ...values };
}
