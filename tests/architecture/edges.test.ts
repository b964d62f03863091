import { describe, expect, test } from "vitest";
import { DATABASE_OPENERS, ROOM_EDGES, SDK_ROOMS } from "./rooms";
import { importsOf, roomOf, type Source, sources } from "./sources";

/*
 * Reads imports as text. It does not prove that a function called through a door does what its name says, nor see
 * an import made by a computed path.
 */
const CLIENT_SAFE =
  /\/(states|schemas|vocabularies|version-roles|money|currencies|identifiers|contour|record\/schema|rate-card|tempo-words)$/;
const libSources = sources.filter(
  (source) => source.path.startsWith("lib/") && !source.path.startsWith("lib/commands/"),
);
const isClient = (source: Source) => /^["']use client["']/m.test(source.text.slice(0, 200));

function offences(
  list: readonly Source[],
  isOffence: (source: Source, from: string, typeOnly: boolean) => boolean,
): string[] {
  return list.flatMap((source) =>
    importsOf(source)
      .filter((entry) => isOffence(source, entry.from, entry.typeOnly))
      .map((entry) => `${source.path} imports ${entry.from}`),
  );
}

describe("edges", () => {
  test("a room uses only the rooms on its line of the table", () => {
    expect(
      offences(libSources, (source, from) => {
        const room = roomOf(source.path);
        const other = roomOf(from);
        return room !== null && other !== null && other !== room && !ROOM_EDGES[room]?.includes(other);
      }),
    ).toEqual([]);
  });

  test("the table of rooms has no cycle", () => {
    const visit = (room: string, path: readonly string[]): void => {
      expect(path, `${[...path, room].join(" → ")}`).not.toContain(room);
      for (const next of ROOM_EDGES[room] ?? []) visit(next, [...path, room]);
    };
    for (const room of Object.keys(ROOM_EDGES)) visit(room, []);
  });

  test("a room is entered through its index, or through its client-safe constants", () => {
    expect(
      offences(
        sources.filter((source) => !source.path.startsWith("lib/commands/")),
        (source, from, typeOnly) => {
          const other = roomOf(from);
          if (
            other === null ||
            other === "kernel" ||
            other === roomOf(source.path) ||
            from === `lib/${other}`
          )
            return false;
          if (other === "web" && source.path === "proxy.ts") return false;
          return !(typeOnly || CLIENT_SAFE.test(from) || from.endsWith("/jobs"));
        },
      ),
    ).toEqual([]);
  });

  test("only the kernel, the jobs and the named files open the database", () => {
    expect(
      offences(sources, (source, from, typeOnly) => {
        if (from !== "db/client" || typeOnly) return false;
        const takesTypesOnly = !/\bdb\(\)|closeDb/.test(source.text);
        return (
          !takesTypesOnly &&
          !/^lib\/(kernel|jobs)\//.test(source.path) &&
          !DATABASE_OPENERS.some((path) => source.path.startsWith(path))
        );
      }),
    ).toEqual([]);
  });

  test("a room reads and writes only its own tables", () => {
    const shared: Record<string, string> = {
      infrastructure: "jobs mail uploads reports accounts deliveries review catalogue screening licensing",
      kernel: "kernel accounts",
    };
    expect(
      offences(libSources, (source, from) => {
        const schema = /^db\/schema\/([a-z]+)$/.exec(from)?.[1];
        const room = roomOf(source.path);
        return (
          schema !== undefined &&
          room !== null &&
          schema !== room &&
          !shared[schema]?.split(" ").includes(room)
        );
      }),
    ).toEqual([]);
  });

  test("vendor SDKs stay in their one room", () => {
    expect(
      offences(libSources, (source, from) =>
        Object.entries(SDK_ROOMS).some(
          ([sdk, room]) => (from === sdk || from.startsWith(`${sdk}/`)) && roomOf(source.path) !== room,
        ),
      ),
    ).toEqual([]);
  });

  test("no room but web knows Next or React, and fingerprint and the pure part of audio know nothing of Node", () => {
    expect(
      offences(
        libSources,
        (source, from) => /^(next|react)(\/|$)/.test(from) && roomOf(source.path) !== "web",
      ),
    ).toEqual([]);
    expect(
      offences(
        libSources,
        (source, from) =>
          roomOf(source.path) === "fingerprint" &&
          (/^node:/.test(from) || /^(lib|db)\//.test(from)) &&
          roomOf(from) !== "fingerprint",
      ),
    ).toEqual([]);
    expect(
      offences(
        libSources,
        (source, from) =>
          roomOf(source.path) === "audio" && /^(lib|db)\//.test(from) && roomOf(from) !== "audio",
      ),
    ).toEqual([]);
  });

  test("components get their data by props: none imports a verb, the database or a page", () => {
    expect(
      offences(
        sources.filter((source) => source.path.startsWith("components/")),
        (source, from, typeOnly) => {
          if (typeOnly || CLIENT_SAFE.test(from) || from.startsWith("components/")) return false;
          if (/^app\/.*actions$/.test(from)) return !isClient(source);
          return (
            /^(app|db)\//.test(from) ||
            (from.startsWith("lib/") &&
              !from.startsWith("lib/kernel/") &&
              !from.startsWith("lib/audio") &&
              !from.startsWith("lib/fingerprint"))
          );
        },
      ),
    ).toEqual([]);
  });

  test("only the environment's parser reads process.env", () => {
    const allowed = ["lib/kernel/env.ts", "lib/kernel/log.ts"];
    const readers = sources.filter(
      (source) =>
        /process\.env/.test(source.text) &&
        !/^(lib\/commands|fixtures|db\/seed)\//.test(source.path) &&
        !allowed.includes(source.path),
    );
    expect(readers.map((source) => source.path)).toEqual([]);
  });
});
