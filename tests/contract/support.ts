import { type ChildProcess, spawn } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { createServer, type IncomingHttpHeaders, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { FaultRule } from "@/fixtures/services/faults";

export const API_KEY = "sk_live_contract";
export const TOKEN = Buffer.from(
  JSON.stringify({ apiKey: API_KEY, appId: "contract", regions: ["lo1"] }),
).toString("base64");
export const STRIPE_SECRET_KEY = "sk_test_contract";
export const STRIPE_WEBHOOK_SECRET = "whsec_contract";
export const RESEND_API_KEY = "re_contract";

const root = fileURLToPath(new URL("../..", import.meta.url));

export function temporaryDir(): { path: string; remove(): void } {
  const path = mkdtempSync(join(tmpdir(), "sedgewren-contract-"));
  return { path, remove: () => rmSync(path, { recursive: true, force: true }) };
}

export async function control(
  url: string,
  message: Record<string, unknown> & { rules?: FaultRule[] },
): Promise<unknown> {
  const answer = await fetch(`${url}/__control`, { method: "POST", body: JSON.stringify(message) });
  if (!answer.ok) throw new Error(`control answered ${answer.status}: ${await answer.text()}`);
  return ((await answer.json()) as { result: unknown }).result;
}

export interface Received {
  path: string;
  headers: IncomingHttpHeaders;
  body: string;
}

/** A site that takes what the far ends post, answering as `answerWith` says. */
export class Receiver {
  readonly received: Received[] = [];
  answerWith: (received: Received) => number = () => 200;
  private waiting: (() => void)[] = [];
  private server: Server | undefined;
  url = "";

  async start(): Promise<void> {
    this.server = createServer(async (request, response) => {
      const parts: Buffer[] = [];
      for await (const part of request as AsyncIterable<Buffer>) parts.push(part);
      const received = {
        path: request.url ?? "",
        headers: request.headers,
        body: Buffer.concat(parts).toString("utf8"),
      };
      this.received.push(received);
      response.writeHead(this.answerWith(received));
      response.end();
      for (const resolve of this.waiting.splice(0)) resolve();
    });
    await new Promise<void>((resolve) => this.server?.listen(0, "127.0.0.1", resolve));
    this.url = `http://127.0.0.1:${(this.server.address() as AddressInfo).port}`;
  }

  /** Resolves when something that was received fits; the test's own time limit ends a wait in vain. */
  async until<T>(find: (received: readonly Received[]) => T | undefined): Promise<T> {
    for (;;) {
      const found = find(this.received);
      if (found !== undefined) return found;
      await new Promise<void>((resolve) => this.waiting.push(resolve));
    }
  }

  async stop(): Promise<void> {
    this.server?.closeAllConnections();
    await new Promise((resolve) => this.server?.close(resolve));
  }
}

export interface ChildStandIn {
  url: string;
  pid: number;
  /** SIGKILL: nothing gets a chance to tidy up. */
  kill(): Promise<void>;
}

/** One stand-in in a process of its own, as the start command runs it. */
export async function spawnStandIn(
  name: "files" | "payments" | "mail",
  dataDir: string,
  port: number,
  more: Record<string, string> = {},
): Promise<ChildStandIn> {
  const child: ChildProcess = spawn(
    process.execPath,
    [
      "--import",
      "tsx",
      "fixtures/services/start.ts",
      name,
      "--data",
      dataDir,
      `--${name}-port`,
      String(port),
    ],
    {
      cwd: root,
      env: {
        NODE_ENV: "test",
        PATH: process.env.PATH ?? "",
        UPLOADTHING_TOKEN: TOKEN,
        STRIPE_SECRET_KEY,
        STRIPE_WEBHOOK_SECRET,
        RESEND_API_KEY,
        ...more,
      },
      stdio: ["ignore", "pipe", "pipe"],
    },
  );
  const url = await new Promise<string>((resolve, reject) => {
    let output = "";
    let errors = "";
    child.stderr?.on("data", (part: Buffer) => {
      errors += part.toString();
    });
    child.stdout?.on("data", (part: Buffer) => {
      output += part.toString();
      const line = output.split("\n")[0] ?? "";
      if (output.includes("\n")) resolve((JSON.parse(line) as { url: string }).url);
    });
    child.once("exit", (code) => reject(new Error(`the stand-in ended with ${code}: ${errors}`)));
  });
  return {
    url,
    pid: child.pid ?? 0,
    kill: () =>
      new Promise((resolve) => {
        child.once("exit", () => resolve());
        child.kill("SIGKILL");
      }),
  };
}

export async function freePort(): Promise<number> {
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const { port } = server.address() as AddressInfo;
  await new Promise((resolve) => server.close(resolve));
  return port;
}
