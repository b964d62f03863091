import ts from "typescript";
import { describe, expect, test } from "vitest";
import { sources } from "./sources";

/** Data tables live alone and may be as long as their data. */
const DATA_TABLES =
  /^(db\/seed\/data|db\/schema)\/|\/(vocabularies|currencies|holidays|common-passwords|cue-scores)\.ts$/;
const FILE_LINES = 400;
const PAGE_LINES = 120;
const FUNCTION_LINES = 80;

const lines = (text: string) => text.split("\n").length;

describe("sizes", () => {
  test(`no source file is longer than ${FILE_LINES} lines, no page longer than ${PAGE_LINES}`, () => {
    const long = sources
      .filter((source) => !DATA_TABLES.test(source.path))
      .filter(
        (source) => lines(source.text) > (source.path.endsWith("page.tsx") ? PAGE_LINES : FILE_LINES) + 1,
      )
      .map((source) => `${source.path}: ${lines(source.text)}`);
    expect(long).toEqual([]);
  });

  test(`no function is longer than ${FUNCTION_LINES} lines, components apart`, () => {
    const long = sources
      .filter((source) => !DATA_TABLES.test(source.path) && source.path.endsWith(".ts"))
      .flatMap((source) => {
        const found: string[] = [];
        const visit = (node: ts.Node): void => {
          if (ts.isFunctionLike(node) && "body" in node && node.body) {
            const count = lines(node.getText());
            if (count > FUNCTION_LINES)
              found.push(`${source.path}: ${node.name?.getText() ?? "anonymous"} ${count}`);
          }
          ts.forEachChild(node, visit);
        };
        visit(source.tree);
        return found;
      });
    expect(long).toEqual([]);
  });
});
