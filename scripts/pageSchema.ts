/** Writes examples/page.schema.json: the JSON Schema of the page document, made from the schema the engine itself reads with. */
import { writeFileSync } from "node:fs";
import { resolve } from "node:path";
import { pageJsonSchema } from "@/cells";

writeFileSync(resolve(import.meta.dirname, "../examples/page.schema.json"), `${JSON.stringify(pageJsonSchema(), null, 2)}\n`);
