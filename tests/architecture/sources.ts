import { readdirSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import ts from "typescript";

export const root = fileURLToPath(new URL("../..", import.meta.url));

export interface Source {
  path: string;
  text: string;
  tree: ts.SourceFile;
}

const FOLDERS = ["app", "components", "lib", "db", "emails", "fixtures"];

/** Every TypeScript source of the product, parsed once. */
export const sources: Source[] = FOLDERS.flatMap((folder) => {
  let names: string[];
  try {
    names = readdirSync(`${root}${folder}`, { recursive: true }) as string[];
  } catch {
    return [];
  }
  return names
    .filter((name) => /\.tsx?$/.test(name) && !name.startsWith("migrations/"))
    .map((name) => {
      const path = `${folder}/${name}`;
      const text = readFileSync(root + path, "utf8");
      return {
        path,
        text,
        tree: ts.createSourceFile(
          path,
          text,
          ts.ScriptTarget.ESNext,
          true,
          path.endsWith("x") ? ts.ScriptKind.TSX : ts.ScriptKind.TS,
        ),
      };
    });
});

export interface Import {
  from: string;
  typeOnly: boolean;
}

/** Modules that a source imports, with relative paths resolved to `lib/...` form. */
export function importsOf(source: Source): Import[] {
  const found: Import[] = [];
  const visit = (node: ts.Node): void => {
    if (
      (ts.isImportDeclaration(node) || ts.isExportDeclaration(node)) &&
      node.moduleSpecifier &&
      ts.isStringLiteral(node.moduleSpecifier)
    ) {
      const clause = ts.isImportDeclaration(node) ? node.importClause : undefined;
      const named = clause?.namedBindings;
      const allTypes =
        !clause?.name &&
        named &&
        ts.isNamedImports(named) &&
        named.elements.length > 0 &&
        named.elements.every((element) => element.isTypeOnly);
      const typeOnly = ts.isImportDeclaration(node)
        ? Boolean(clause?.isTypeOnly || allTypes)
        : node.isTypeOnly;
      found.push({ from: resolve(source.path, node.moduleSpecifier.text), typeOnly });
    }
    if (
      ts.isCallExpression(node) &&
      node.expression.kind === ts.SyntaxKind.ImportKeyword &&
      node.arguments[0] &&
      ts.isStringLiteral(node.arguments[0])
    ) {
      found.push({ from: resolve(source.path, node.arguments[0].text), typeOnly: false });
    }
    ts.forEachChild(node, visit);
  };
  visit(source.tree);
  return found;
}

function resolve(path: string, specifier: string): string {
  if (specifier.startsWith("@/")) return specifier.slice(2);
  if (!specifier.startsWith(".")) return specifier;
  const parts = path.split("/").slice(0, -1);
  for (const step of specifier.split("/")) {
    if (step === "..") parts.pop();
    else if (step !== ".") parts.push(step);
  }
  return parts.join("/");
}

export const roomOf = (path: string): string | null => /^lib\/([a-z]+)\//.exec(`${path}/`)?.[1] ?? null;
