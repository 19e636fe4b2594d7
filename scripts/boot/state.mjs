import { randomBytes } from "node:crypto";
import { chmodSync, existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { home, root } from "./shared.mjs";

const stateFile = () => path.join(home(), "state.json");

/** Passwords, secret and port of the private cluster: made once, kept readable by their owner alone. */
export function readState() {
  const fresh = { owner: randomBytes(24).toString("hex"), application: randomBytes(24).toString("hex"), secret: randomBytes(32).toString("hex"), port: 0 };
  const kept = existsSync(stateFile()) ? JSON.parse(readFileSync(stateFile(), "utf8")) : {};
  const state = { ...fresh, ...kept };
  writeState(state);
  return state;
}

export function writeState(state) {
  writeFileSync(stateFile(), JSON.stringify(state), { mode: 0o600 });
  chmodSync(stateFile(), 0o600);
}

/** What `run` and the tests need to know, by mode, in `.data/<mode>.json`. */
export function writeBootFile(mode, environment) {
  const folder = path.join(root, ".data");
  mkdirSync(folder, { recursive: true });
  const full = { NEXTAUTH_SECRET: process.env.NEXTAUTH_SECRET ?? readState().secret, ...environment };
  writeFileSync(path.join(folder, `${mode}.json`), JSON.stringify(full), { mode: 0o600 });
  return full;
}

export function readBootFile(mode) {
  return JSON.parse(readFileSync(path.join(root, ".data", `${mode}.json`), "utf8"));
}
