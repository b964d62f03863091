import { randomBytes } from "node:crypto";
import { readFileSync } from "node:fs";
import { writePrivateFile } from "./env-file.mjs";
import { newPassword } from "./mariadb.mjs";

const hex = (bytes) => randomBytes(bytes).toString("hex");

const MAKERS = {
  ownerPassword: newPassword,
  appPassword: newPassword,
  nextauthSecret: () => hex(32),
  uploadthingApiKey: () => `sk_live_${hex(32)}`,
  uploadthingAppId: () => hex(5),
  stripeSecretKey: () => `sk_test_${hex(24)}`,
  stripeWebhookSecret: () => `whsec_${hex(24)}`,
  resendApiKey: () => `re_${hex(16)}`,
  recordSigningSeed: () => hex(32),
  fieldKey: () => hex(32),
  businessClockAnchor: () => new Date().toISOString(),
};

/** Tests make databases and accounts of their own, so they alone have an administrator. */
export const TEST_MAKERS = { ...MAKERS, adminPassword: newPassword };

export function makeSecrets(kept = {}, makers = MAKERS) {
  return Object.fromEntries(Object.entries(makers).map(([name, make]) => [name, kept[name] ?? make()]));
}

/** Made once and kept: records signed by the first start must still verify after the hundredth. */
export function keepSecrets(path, makers = MAKERS) {
  let kept = {};
  try {
    kept = JSON.parse(readFileSync(path, "utf8"));
  } catch (error) {
    if (error.code !== "ENOENT") throw error;
  }
  const secrets = makeSecrets(kept, makers);
  if (JSON.stringify(secrets) !== JSON.stringify(kept))
    writePrivateFile(path, `${JSON.stringify(secrets, null, 2)}\n`);
  return secrets;
}
