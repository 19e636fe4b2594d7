import { readdirSync, readFileSync } from "node:fs";
import path from "node:path";
import { describe, expect, it } from "vitest";

const root = path.resolve(import.meta.dirname, "..");
const read = (file: string): string => readFileSync(path.join(root, file), "utf8");
const ignored = new Set([
  ".git",
  "next-env.d.ts",
  ...read(".gitignore")
    .split("\n")
    .map((line) => line.replace(/\/$/u, "")),
]);
const tracked = filesBelow("");

/** Every file of the project; a fresh machine has no git to ask. */
function filesBelow(folder: string): string[] {
  return readdirSync(path.join(root, folder), { withFileTypes: true }).flatMap((entry) => {
    const file = path.posix.join(folder, entry.name);
    if (ignored.has(entry.name) || ignored.has(`/${file}`) || entry.name.endsWith(".tsbuildinfo")) return [];
    return entry.isDirectory() ? filesBelow(file) : [file];
  });
}

describe("the house", () => {
  it("opens the README with the job in one paragraph, then the two commands", () => {
    const [title, job, commands] = read("README.md").split("\n\n");
    expect(title).toBe("# Cotectic");
    expect(job?.split("\n")).toHaveLength(1);
    expect(commands).toMatch(/npm start\nnpm test/);
  });

  it("keeps registry addresses out of the lock file", () => {
    expect(read("package-lock.json")).not.toMatch(/"resolved"|https?:\/\/[^"]*\.tgz/);
  });

  it("lets only DEVELOPERS.md speak of where the product grew out of", () => {
    const word = ["lec", "ture"].join("");
    const citing = tracked
      .filter((file) => /\.(ts|tsx|mjs|md|json|css)$/.test(file) && file !== "package-lock.json" && file !== "DEVELOPERS.md")
      .filter((file) => new RegExp(`\\b${word}`, "i").test(read(file)));
    expect(citing).toEqual([]);
  });

  it("holds at the top level only what the house plan names", () => {
    const plan = [
      "README.md",
      "DEVELOPERS.md",
      "package.json",
      "next.config.ts",
      "tailwind.config.ts",
      "drizzle.config.ts",
      "app",
      "realtime",
      "cells",
      "db",
      "tests",
      "examples",
    ];
    const demanded = ["package-lock.json", "tsconfig.json", "postcss.config.mjs", "eslint.config.mjs", "vitest.config.ts", "proxy.ts", "public", "scripts"];
    const there = new Set(tracked.map((file) => file.split("/")[0] ?? "").filter((name) => !name.startsWith(".")));
    expect([...there].filter((name) => !plan.includes(name) && !demanded.includes(name))).toEqual([]);
  });

  it("skips no test and silences no tool", () => {
    const silenced = new RegExp(["\\b(it|test|describe)\\.(skip|only|todo)\\(", "@ts-ignore", "@ts-nocheck", ["eslint", "disable"].join("-")].join("|"));
    const offending = tracked.filter((file) => /\.(ts|tsx|mjs)$/.test(file) && file !== "tests/house.test.ts").filter((file) => silenced.test(read(file)));
    expect(offending).toEqual([]);
  });
});
