import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { stopAllChildren, stopChild } from "./children.mjs";
import { formatEnv, readEnvFile, writePrivateFile } from "./env-file.mjs";
import { demoEnvironment, USUAL_PORTS } from "./environment.mjs";
import { findRunning, startMariadb } from "./mariadb.mjs";
import { missingDebianPackages } from "./packages.mjs";
import { dataDir, makeDataDir } from "./paths.mjs";
import { pickPorts } from "./ports.mjs";
import { Stop } from "./progress.mjs";
import { keepSecrets } from "./secrets.mjs";
import { migrate, serviceUrls, startServices, waitForAnswers } from "./stack.mjs";

async function startOwn() {
  if (missingDebianPackages(["mariadb-server"]).length > 0) {
    throw new Stop("MariaDB is not installed. `npm run up` installs it and makes the database.");
  }
  const secrets = keepSecrets(join(dataDir, "secrets.json"));
  const portsPath = join(dataDir, "ports.json");
  const remembered = existsSync(portsPath) ? JSON.parse(readFileSync(portsPath, "utf8")) : {};
  const ports = await pickPorts(USUAL_PORTS, remembered);
  const database = await startMariadb({
    dir: makeDataDir("mariadb"),
    wantedPort: ports.database,
    passwords: { ownerPassword: secrets.ownerPassword, appPassword: secrets.appPassword },
  });
  ports.database = database.port;
  const values = demoEnvironment({ ports, secrets, mediaDir: makeDataDir("media") });
  writePrivateFile(join(dataDir, "env"), formatEnv(values));
  const services = startServices({
    values,
    servicesDir: makeDataDir("services"),
    log: join(dataDir, "logs", "stand-ins.log"),
  });
  const stop = async () => {
    await stopChild(services);
    await database.stop();
    await stopAllChildren();
  };
  try {
    await migrate(values);
    await waitForAnswers({ child: services, urls: serviceUrls(values) });
  } catch (error) {
    await stop();
    throw error;
  }
  return { values, stop };
}

/**
 * The database and the stand-ins for a command that runs by itself. `DATABASE_URL` in the environment
 * points it elsewhere; what `npm run up` runs is shared; otherwise both are started, and `stop` ends them.
 */
export async function productAtHand() {
  const running = findRunning(join(dataDir, "mariadb"));
  const values = readEnvFile(join(dataDir, "env"));
  if (process.env.DATABASE_URL !== undefined) {
    const unset = Object.entries(values ?? {}).filter(([name]) => process.env[name] === undefined);
    return { values: Object.fromEntries(unset), stop: async () => {} };
  }
  if (running?.isStarterAlive && values !== null) return { values, stop: async () => {} };
  return startOwn();
}
