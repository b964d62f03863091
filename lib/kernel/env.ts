import { z } from "zod";

const hex32 = z.string().regex(/^[0-9a-f]{64}$/, "32 bytes in hexadecimal");

const Environment = z
  .object({
    SEDGEWREN_MODE: z.enum(["demo", "live"]).default("demo"),
    SITE_URL: z.url().default("http://127.0.0.1:3400"),
    DATABASE_URL: z.string().startsWith("mysql://"),
    DATABASE_OWNER_URL: z.string().startsWith("mysql://").optional(),
    NEXTAUTH_SECRET: z.string().min(32),
    UPLOADTHING_TOKEN: z.string().min(1),
    UPLOADTHING_INGEST_URL: z.string().optional(),
    UPLOADTHING_API_URL: z.string().optional(),
    UPLOADTHING_CALLBACK_URL: z.string().optional(),
    UPLOADTHING_UFS_HOST: z.string().optional(),
    UPLOADTHING_UFS_APP_ID_LOCATION: z.enum(["subdomain", "path"]).default("subdomain"),
    UPLOADTHING_LOG_LEVEL: z.string().default("Warning"),
    UPLOADTHING_IS_DEV: z.stringbool().default(false),
    STRIPE_SECRET_KEY: z.string().startsWith("sk_"),
    STRIPE_WEBHOOK_SECRET: z.string().startsWith("whsec_"),
    STRIPE_API_BASE: z.url().optional(),
    RESEND_API_KEY: z.string().startsWith("re_"),
    RESEND_BASE_URL: z.url().optional(),
    MAIL_FROM: z.string().min(3),
    /** Seed of the Ed25519 key that signs licence records. */
    RECORD_SIGNING_SEED: hex32,
    /** Encrypts second-factor secrets and reporters' contact data at rest. */
    FIELD_KEY: hex32,
    BUSINESS_CLOCK_START: z.iso.datetime().optional(),
    BUSINESS_CLOCK_ANCHOR: z.iso.datetime().optional(),
    /** How much of the demonstration is brought, and how long its cues are: less and shorter for tests. */
    DEMO_CUES: z.coerce.number().int().min(1).max(40).default(40),
    DEMO_CUE_SECONDS: z.coerce.number().min(20).optional(),
    MEDIA_DIR: z.string().default(".data/media"),
    LOG_LEVEL: z.enum(["silent", "fatal", "error", "warn", "info", "debug"]).default("info"),
  })
  .superRefine((value, context) => {
    if (value.SEDGEWREN_MODE !== "live") return;
    for (const name of [
      "STRIPE_API_BASE",
      "RESEND_BASE_URL",
      "UPLOADTHING_API_URL",
      "BUSINESS_CLOCK_START",
    ] as const) {
      if (value[name] !== undefined) {
        context.addIssue({
          code: "custom",
          path: [name],
          message: "must not be set in live mode: it points at a stand-in or sets the clock",
        });
      }
    }
  });

export type Environment = z.infer<typeof Environment>;

/** Parses the environment, or throws one message that names every variable that is wrong. */
export function parseEnvironment(source: Record<string, string | undefined>): Environment {
  const parsed = Environment.safeParse(source);
  if (parsed.success) return parsed.data;
  const lines = parsed.error.issues.map((issue) => `${issue.path.join(".")}: ${issue.message}`);
  throw new Error(`The environment is not complete:\n${lines.join("\n")}`);
}

let parsed: Environment | undefined;

/** The only reader of process.env. Parsed on first use, so that a build needs no secrets. */
export const env: Environment = new Proxy({} as Environment, {
  get(_target, name) {
    parsed ??= parseEnvironment(process.env);
    return parsed[name as keyof Environment];
  },
});
