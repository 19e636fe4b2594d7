import { openSync, readFileSync, rmSync, writeSync, closeSync } from "node:fs";
import { log } from "./shared.mjs";

/**
 * One boot at a time: two at once would both run initdb. A lock whose owner is gone is taken over.
 *
 * @returns a function that gives the lock back
 */
export async function acquireLock(file) {
  let told = false;
  for (;;) {
    try {
      const handle = openSync(file, "wx");
      writeSync(handle, String(process.pid));
      closeSync(handle);
      const release = () => rmSync(file, { force: true });
      process.once("exit", release);
      return release;
    } catch (error) {
      if (error.code !== "EEXIST") throw error;
    }
    const owner = Number(readQuietly(file));
    if (!owner || !isAlive(owner)) {
      rmSync(file, { force: true });
      continue;
    }
    if (!told) log(`waiting for another start of the same installation (process ${owner})`);
    told = true;
    await new Promise((resolve) => setTimeout(resolve, 300));
  }
}

function readQuietly(file) {
  try {
    return readFileSync(file, "utf8");
  } catch {
    return "";
  }
}

function isAlive(pid) {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === "EPERM";
  }
}
