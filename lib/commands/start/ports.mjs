import { createServer } from "node:net";

const HIGHEST_PORT = 65_535;
const LOOPBACKS = ["127.0.0.1", "::1"];

function canListen(port, host) {
  return new Promise((resolve) => {
    const server = createServer();
    server.unref();
    server.once("error", (error) => resolve(error.code === "EADDRNOTAVAIL" || error.code === "EAFNOSUPPORT"));
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(true)));
  });
}

/**
 * Free means free on both loopback addresses: a browser that opens "localhost" may try ::1 first and
 * would otherwise reach somebody else's program.
 */
export async function isPortFree(port) {
  for (const host of LOOPBACKS) {
    if (!(await canListen(port, host))) return false;
  }
  return true;
}

/** The wanted port or the next free one above it that is not in `taken`; the choice is added to `taken`. */
export async function pickPort(wantedPort, taken = new Set()) {
  for (let port = wantedPort; port <= HIGHEST_PORT; port += 1) {
    if (taken.has(port) || !(await isPortFree(port))) continue;
    taken.add(port);
    return port;
  }
  throw new Error(`no free port between ${wantedPort} and ${HIGHEST_PORT}`);
}

/**
 * One free port a name. `remembered` (what the last start used) goes before `usual`, so that addresses
 * kept in mails and bookmarks stay true for as long as nothing else takes them.
 */
export async function pickPorts(usual, remembered = {}) {
  const taken = new Set();
  const ports = {};
  for (const [name, usualPort] of Object.entries(usual)) {
    const previous = remembered[name];
    const wanted =
      Number.isInteger(previous) && previous > 0 && previous <= HIGHEST_PORT ? previous : usualPort;
    ports[name] =
      wanted !== usualPort && !(await isPortFree(wanted))
        ? await pickPort(usualPort, taken)
        : await pickPort(wanted, taken);
  }
  return ports;
}
