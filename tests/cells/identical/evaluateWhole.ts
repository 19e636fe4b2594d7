import { createEngine, readPageDocument } from "@/cells";
import { resultsText } from "../../support/resultsText";
import { wholePage, wholeSources } from "../../support/wholePage";

/** The whole page's results as text, wherever this runs: bundled for Node's threads and for the browser. */
export function evaluateWhole(): string {
  const engine = createEngine();
  for (const [file, text] of Object.entries(wholeSources())) engine.setSource(file, new TextEncoder().encode(text));
  return resultsText(engine.evaluate(readPageDocument(JSON.parse(JSON.stringify(wholePage())))));
}
