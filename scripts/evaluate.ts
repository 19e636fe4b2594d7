/**
 * Evaluates a page document: `npm run -s evaluate -- PAGE.json [--format json|table]`.
 *
 * Prints one JSON object on stdout and nothing else; files are relative to the page. Exit 0: no error anywhere; 1: some block
 * has a problem of severity `error`; 2: the page cannot be read, with one line on stderr.
 */
import { readFileSync } from "node:fs";
import { dirname, resolve } from "node:path";
import { createEngine, hasErrors, readPageDocument, resultsJson, resultsTable, UnreadablePageError, type Engine, type PageDocument } from "@/cells";

interface Options {
  readonly file: string;
  readonly format: "json" | "table";
}

const usage = "Write: npm run -s evaluate -- PAGE.json [--format json|table]";

function readOptions(given: readonly string[]): Options {
  let file: string | undefined;
  let format: string = "json";
  for (let i = 0; i < given.length; i++) {
    const argument = given[i] ?? "";
    if (argument === "--format") format = given[++i] ?? "";
    else if (argument.startsWith("--format=")) format = argument.slice("--format=".length);
    else if (argument.startsWith("--")) throw new UnreadablePageError(`There is no option ${argument}. ${usage}`);
    else if (file === undefined) file = argument;
    else throw new UnreadablePageError(`One page at a time: ${file} and ${argument} were given. ${usage}`);
  }
  if (file === undefined) throw new UnreadablePageError(`No page was given. ${usage}`);
  if (format !== "json" && format !== "table") throw new UnreadablePageError(`There is no format "${format}". ${usage}`);
  return { file, format };
}

function readPage(file: string): PageDocument {
  let text: string;
  try {
    text = readFileSync(file, "utf8");
  } catch (error) {
    throw new UnreadablePageError(`${file} cannot be read: ${error instanceof Error ? error.message : String(error)}`);
  }
  let json: unknown;
  try {
    json = JSON.parse(text.replace(/^\uFEFF/u, ""));
  } catch (error) {
    throw new UnreadablePageError(`${file} is not JSON: ${error instanceof Error ? error.message : String(error)}`);
  }
  return readPageDocument(json);
}

/** Gives the engine every source it can find; one that is not there is a problem of its block, which the engine names. */
function giveSources(engine: Engine, page: PageDocument, folder: string): void {
  for (const block of page.blocks) {
    if (block.kind !== "data" || block.source === undefined) continue;
    try {
      engine.setSource(block.source.file, readFileSync(resolve(folder, block.source.file)));
    } catch {
      continue;
    }
  }
}

function main(): number {
  try {
    const { file, format } = readOptions(process.argv.slice(2));
    const page = readPage(file);
    const engine = createEngine();
    giveSources(engine, page, dirname(resolve(file)));
    const results = engine.evaluate(page);
    process.stdout.write(format === "table" ? resultsTable(page, results) : `${JSON.stringify(resultsJson(results), null, 1)}\n`);
    return hasErrors(results) ? 1 : 0;
  } catch (error) {
    if (!(error instanceof UnreadablePageError)) throw error;
    process.stderr.write(`${error.message.replace(/\s+/gu, " ")}\n`);
    return 2;
  }
}

process.exitCode = main();
