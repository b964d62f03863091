import { expect, test } from "vitest";
import {
  installCommand,
  isInstalledAsLocked,
  missingDebianPackages,
} from "@/lib/commands/start/packages.mjs";

const lock = (packages: Record<string, unknown>) => ({ packages: { "": { name: "x" }, ...packages } });

test("a Debian package is missing when any of its programs is", () => {
  const find = (name: string) => (name === "ffprobe" ? null : `/usr/bin/${name}`);
  expect(missingDebianPackages(["mariadb-server", "ffmpeg"], find)).toEqual(["ffmpeg"]);
  expect(missingDebianPackages(["mariadb-server"], find)).toEqual([]);
});

test("the command told to somebody who is not root is the one that root would run", () => {
  expect(installCommand(["mariadb-server", "ffmpeg"])).toBe(
    "apt-get update && apt-get install -y --no-install-recommends mariadb-server ffmpeg",
  );
});

test("packages are installed when npm's own record has each at the locked version", () => {
  const wanted = lock({ "node_modules/a": { version: "1.0.0" }, "node_modules/b": { version: "2.0.0" } });
  expect(
    isInstalledAsLocked(wanted, {
      packages: { "node_modules/a": { version: "1.0.0" }, "node_modules/b": { version: "2.0.0" } },
    }),
  ).toBe(true);
  expect(isInstalledAsLocked(wanted, { packages: { "node_modules/a": { version: "1.0.0" } } })).toBe(false);
  expect(
    isInstalledAsLocked(wanted, {
      packages: { "node_modules/a": { version: "1.0.0" }, "node_modules/b": { version: "2.0.1" } },
    }),
  ).toBe(false);
});

test("an optional package of another platform may be absent, but not be another version", () => {
  const wanted = lock({ "node_modules/a": { version: "1.0.0", optional: true } });
  expect(isInstalledAsLocked(wanted, { packages: {} })).toBe(true);
  expect(isInstalledAsLocked(wanted, { packages: { "node_modules/a": { version: "0.9.0" } } })).toBe(false);
});
