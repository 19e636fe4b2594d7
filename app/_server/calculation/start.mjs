// A worker thread starts here, in plain JavaScript, and then reads our TypeScript.
import { register } from "tsx/esm/api";

register();
await import("./worker.ts");
