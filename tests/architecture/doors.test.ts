import ts from "typescript";
import { describe, expect, test } from "vitest";
import { FOREIGN_ROUTES } from "./rooms";
import { sources } from "./sources";

/*
 * Every way in from the network goes through a wrapper of lib/web. This reads source text: it proves that the wrapper is
 * called, not that the verb behind it asks for the right thing; the matrix does that.
 */
const hasDirective = (tree: ts.SourceFile, directive: string) =>
  tree.statements.some(
    (statement) =>
      ts.isExpressionStatement(statement) &&
      ts.isStringLiteral(statement.expression) &&
      statement.expression.text === directive,
  );

function exportedInitialisers(tree: ts.SourceFile): { name: string; callee: string | null }[] {
  return tree.statements.flatMap((statement) => {
    const exported =
      ts.canHaveModifiers(statement) &&
      ts.getModifiers(statement)?.some((modifier) => modifier.kind === ts.SyntaxKind.ExportKeyword);
    if (!exported) return [];
    if (ts.isVariableStatement(statement)) {
      return statement.declarationList.declarations.map((declaration) => ({
        name: declaration.name.getText(),
        callee:
          declaration.initializer && ts.isCallExpression(declaration.initializer)
            ? declaration.initializer.expression.getText()
            : null,
      }));
    }
    if (ts.isFunctionDeclaration(statement))
      return [{ name: statement.name?.text ?? "default", callee: null }];
    return [];
  });
}

describe("doors", () => {
  test("every export of a file of server actions is action(verb)", () => {
    const wrong = sources
      .filter((source) => hasDirective(source.tree, "use server") && !source.path.startsWith("lib/web/"))
      .flatMap((source) =>
        exportedInitialisers(source.tree)
          .filter((entry) => entry.callee !== "action")
          .map((entry) => `${source.path}: ${entry.name}`),
      );
    expect(wrong).toEqual([]);
  });

  test("server actions live in actions.ts files and are never written inline", () => {
    const inline = sources.filter(
      (source) =>
        /["']use server["']/.test(source.text) &&
        !source.path.endsWith("/actions.ts") &&
        !source.path.startsWith("lib/web/"),
    );
    expect(inline.map((source) => source.path)).toEqual([]);
  });

  test("every method of a route handler comes from route() or webhook()", () => {
    const wrong = sources
      .filter((source) => source.path.endsWith("/route.ts") && !(source.path in FOREIGN_ROUTES))
      .flatMap((source) =>
        exportedInitialisers(source.tree)
          .filter(
            (entry) =>
              /^(GET|HEAD|POST|PUT|PATCH|DELETE|OPTIONS)$/.test(entry.name) &&
              !["route", "webhook"].includes(entry.callee ?? ""),
          )
          .map((entry) => `${source.path}: ${entry.name}`),
      );
    expect(wrong).toEqual([]);
  });

  test("no layout and not the proxy decides access", () => {
    const deciding = sources.filter(
      (source) => source.path.endsWith("layout.tsx") && /\b(redirect|notFound|forbidden)\(/.test(source.text),
    );
    expect(deciding.map((source) => source.path)).toEqual([]);
  });

  test("every verb is made by command() or query(): nothing else opens a transaction", () => {
    const openers = sources.filter(
      (source) =>
        /\binTransaction\(/.test(source.text) && !/^lib\/(kernel|jobs|commands)\//.test(source.path),
    );
    expect(openers.map((source) => source.path)).toEqual([]);
  });
});
