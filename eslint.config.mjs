import { defineConfig, globalIgnores } from "eslint/config";
import next from "eslint-config-next/core-web-vitals";
import typescript from "eslint-config-next/typescript";

/** Elementary functions of the engine are our own, so that every machine gives the same bits. */
const allowedMath = ["sqrt", "abs", "min", "max", "floor", "ceil", "trunc"];

const noParserEvaluation = {
  selector: "CallExpression[callee.property.name=/^(evaluate|simplify|substitute|toJSFunction)$/][callee.object.name=/^(parser|expression|parsed)$/i]",
  message: "Only Parser.parse(text).tokens of the parser package is used; it never evaluates.",
};

/** Imports that would point the wrong way, by the folder they would stand in. */
function forbid(...patterns) {
  return ["error", { patterns: patterns.map(([group, message]) => ({ group, message })) }];
}
const deepCells = [["@/cells/*", "**/cells/*/**"], "Import from @/cells: the engine has one public face."];
const noApp = [["@/app/*", "@/app", "**/app/_*/**"], "Nothing imports app."];
const testsMayGoDeep = [["@/tests/*"], "Tests are imported by tests only."];

export default defineConfig([
  globalIgnores([".next/**", ".data/**", "node_modules/**", "coverage/**", "next-env.d.ts", "cells/species/reference/**", "db/migrations/**"]),
  ...next,
  ...typescript,
  {
    rules: {
      "import/no-cycle": ["error", { ignoreExternal: true }],
      "import/no-default-export": "off",
      "no-eval": "error",
      "no-implied-eval": "error",
      "no-new-func": "error",
      "no-restricted-syntax": [
        "error",
        noParserEvaluation,
        { selector: "ExportAllDeclaration", message: "Named exports only: a folder's public face is written out." },
      ],
      "@typescript-eslint/consistent-type-imports": "error",
      "@typescript-eslint/no-unused-vars": ["error", { argsIgnorePattern: "^_", varsIgnorePattern: "^_" }],
    },
  },
  {
    files: ["cells/**/*.ts"],
    rules: {
      "no-restricted-imports": forbid(
        [["@/*", "**/app/**", "**/db/**", "**/realtime/**"], "cells imports nothing of ours outside cells."],
        [
          ["react", "react-dom", "next", "next/*", "yjs", "y-*", "pg", "drizzle-orm", "node:*", "fs", "path", "crypto", "ws"],
          "cells is pure: no React, no Yjs, no SQL, no network, no node.",
        ],
      ),
      "no-restricted-globals": [
        "error",
        ...["Date", "Intl", "performance", "fetch", "crypto", "process", "window", "document", "setTimeout"].map((name) => ({
          name,
          message: "cells is pure and gives the same bits everywhere.",
        })),
      ],
      "no-restricted-syntax": [
        "error",
        noParserEvaluation,
        { selector: "ExportAllDeclaration", message: "Named exports only." },
        {
          selector: `MemberExpression[object.name='Math'][property.name!=/^(${allowedMath.join("|")})$/]`,
          message: "Engines differ in this function's last digit; use cells/numeric.",
        },
        { selector: "BinaryExpression[operator='**']", message: "Engines differ in **; use pow of cells/numeric." },
        { selector: "AssignmentExpression[operator='**=']", message: "Engines differ in **; use pow of cells/numeric." },
        {
          selector: "CallExpression[callee.property.name=/^(localeCompare|toLocaleString|toLocaleLowerCase|toLocaleUpperCase)$/]",
          message: "Depends on the machine's language.",
        },
      ],
    },
  },
  {
    files: ["db/**/*.ts"],
    rules: { "no-restricted-imports": forbid(noApp, deepCells, [["@/realtime/*", "**/realtime/**"], "db uses only the types of cells."]) },
  },
  { files: ["db/seed/**/*.ts"], rules: { "no-restricted-imports": forbid(noApp, deepCells) } },
  { files: ["realtime/**/*.ts"], rules: { "no-restricted-imports": forbid(noApp, deepCells, testsMayGoDeep) } },
  { files: ["app/**/*.{ts,tsx}"], rules: { "no-restricted-imports": forbid(deepCells, testsMayGoDeep) } },
  { files: ["scripts/**/*.{ts,mjs}"], rules: { "no-restricted-imports": forbid(noApp) } },
]);
