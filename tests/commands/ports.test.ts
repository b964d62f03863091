import { createServer, type Server } from "node:net";
import { afterEach, expect, test } from "vitest";
import { isPortFree, pickPort, pickPorts } from "@/lib/commands/start/ports.mjs";

const servers: Server[] = [];

async function occupy(host: string, port = 0): Promise<number> {
  const server = createServer();
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen({ port, host, ipv6Only: true }, resolve);
  });
  servers.push(server);
  const address = server.address();
  if (address === null || typeof address === "string") throw new Error("the server has no port");
  return address.port;
}

afterEach(async () => {
  for (const server of servers.splice(0)) await new Promise((resolve) => server.close(resolve));
});

test("a port that somebody listens on is not free, and is free again when they leave", async () => {
  const port = await occupy("127.0.0.1");
  expect(await isPortFree(port)).toBe(false);
  const [server] = servers.splice(0);
  await new Promise((resolve) => server?.close(resolve));
  expect(await isPortFree(port)).toBe(true);
});

test("a port taken on all interfaces is not free on loopback", async () => {
  expect(await isPortFree(await occupy("0.0.0.0"))).toBe(false);
});

test("where the usual port is taken, the next free one above it is picked", async () => {
  const taken = await occupy("127.0.0.1");
  const picked: number = await pickPort(taken);
  expect(picked).toBeGreaterThan(taken);
  expect(await isPortFree(picked)).toBe(true);
});

test("two names never get one port", async () => {
  const base = await occupy("127.0.0.1");
  const ports = await pickPorts({ site: base, files: base, mail: base });
  expect(new Set(Object.values(ports)).size).toBe(3);
  expect(Object.values(ports)).not.toContain(base);
});

test("the ports of the last start are picked again, and the usual ones when those are taken", async () => {
  const taken = await occupy("127.0.0.1");
  const free: number = await pickPort(taken + 10);
  expect(await pickPorts({ site: 3400 }, { site: free })).toEqual({ site: free });
  const { site } = await pickPorts({ site: free }, { site: taken });
  expect(site).toBe(free);
});

test("a remembered port that cannot be one is ignored", async () => {
  const free: number = await pickPort(20_000);
  expect(await pickPorts({ site: free }, { site: 70_000 })).toEqual({ site: free });
  expect(await pickPorts({ site: free }, { site: "3400; rm" })).toEqual({ site: free });
});
