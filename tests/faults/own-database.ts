import "@/tests/support/database";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { migrateDatabase } from "@/lib/commands/migrate";
import { APP, databaseUrl, OWNER, startMariadb } from "@/lib/commands/start/mariadb.mjs";
import { makeSecrets } from "@/lib/commands/start/secrets.mjs";
import { sleep } from "./random-instants";

interface Server {
  port: number;
  stop(): Promise<void>;
  kill(): Promise<void>;
}

export interface OwnDatabase {
  port: number;
  /** SIGKILL, a while with nothing there, then a start on the same files and port. */
  killAndRestart(awayMs: number): Promise<void>;
  close(): Promise<void>;
}

/** A MariaDB of this test's own, which the process is pointed at before it opens its first connection. */
export async function startOwnDatabase(): Promise<OwnDatabase> {
  const root = mkdtempSync(join(tmpdir(), "sedgewren-faults-"));
  const secrets = makeSecrets();
  const dir = join(root, "mariadb");
  const start = (wantedPort: number): Promise<Server> =>
    startMariadb({ dir, wantedPort, passwords: secrets, bufferPool: "64M" });
  let server = await start(20_000 + (process.pid % 20_000));
  const { port } = server;
  const appUrl = databaseUrl({ user: APP, password: secrets.appPassword, port });
  await migrateDatabase({
    ownerUrl: databaseUrl({ user: OWNER, password: secrets.ownerPassword, port }),
    appUrl,
  });
  process.env.DATABASE_URL = appUrl;
  return {
    port,
    async killAndRestart(awayMs) {
      await server.kill();
      await sleep(awayMs);
      server = await start(port);
      if (server.port !== port) throw new Error("the server came back on another port");
    },
    async close() {
      await server.kill();
      rmSync(root, { recursive: true, force: true });
    },
  };
}
