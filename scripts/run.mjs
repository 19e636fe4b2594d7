/**
 * Runs what boot made ready: the web server, the realtime server and, without SMTP_URL, a mailbox that takes the mail.
 *
 *   node scripts/run.mjs [--dev]
 */
import { spawn } from "node:child_process";
import { setTimeout as wait } from "node:timers/promises";
import { canBind, freePort, stopCluster } from "./boot/cluster.mjs";
import { fail, log, root } from "./boot/shared.mjs";
import { readBootFile } from "./boot/state.mjs";

const development = process.argv.includes("--dev");
const boot = readBootFile(development ? "dev" : "start");
const host = process.env.HOST ?? "127.0.0.1";
const port = Number(process.env.PORT ?? 3000);
const realtimePort = Number(process.env.REALTIME_PORT ?? 3001);
const here = process.env.NEXTAUTH_URL ?? `http://localhost:${port}`;

await refuseTakenPorts();
const environment = {
  ...process.env,
  ...boot,
  NODE_ENV: development ? "development" : "production",
  NEXT_TELEMETRY_DISABLED: "1",
  NEXTAUTH_URL: here,
  AUTH_TRUST_HOST: "true",
  PORT: String(port),
  REALTIME_PORT: String(realtimePort),
  REALTIME_HOST: process.env.REALTIME_HOST ?? host,
  APP_ORIGIN: process.env.APP_ORIGIN ?? [...new Set([new URL(here).origin, `http://localhost:${port}`, `http://127.0.0.1:${port}`])].join(","),
};
// Only the boot needs the owner's rights.
delete environment.MIGRATION_DATABASE_URL;
if (!process.env.SMTP_URL) await offerMailbox(environment);

const children = [];
let stopping = false;
child("realtime", ["--import", "tsx", "realtime/server.ts"]);
child("web", ["node_modules/next/dist/bin/next", development ? "dev" : "start", "-H", host, "-p", String(port)]);
if (environment.MAILBOX_SMTP_PORT) child("mailbox", ["scripts/mailbox.mjs"]);
for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"]) process.on(signal, () => void stop(0));
await announce();

function child(name, args) {
  const started = spawn(process.execPath, args, { cwd: root, env: environment, stdio: ["ignore", "inherit", "inherit"] });
  children.push(started);
  started.on("exit", (code, signal) => {
    if (stopping) return;
    console.error(`cotectic: the ${name} process ended (${signal ?? `exit ${code}`}); stopping the rest.`);
    void stop(1);
  });
}

/** Ends the children, by asking first, then the private database server. */
async function stop(code) {
  if (stopping) return;
  stopping = true;
  const gone = children.map((c) => (c.exitCode !== null || c.signalCode ? undefined : new Promise((resolve) => c.once("exit", resolve))));
  for (const c of children) c.kill("SIGTERM");
  await Promise.race([Promise.all(gone), wait(8000)]);
  for (const c of children) if (c.exitCode === null && !c.signalCode) c.kill("SIGKILL");
  if (boot.PRIVATE_CLUSTER) await stopCluster("start");
  log("stopped");
  process.exit(code);
}

async function refuseTakenPorts() {
  for (const [name, number] of [
    ["PORT", port],
    ["REALTIME_PORT", realtimePort],
  ]) {
    if (await canBind(number, host)) continue;
    const ours = await fetch(`http://${host}:${number}/api/health`).then(
      (r) => r.ok,
      () => false,
    );
    fail(ours ? `Cotectic is already running on ${here}.` : `Port ${number} is taken by another program; choose another with ${name}=….`);
  }
}

async function offerMailbox(target) {
  target.MAILBOX_SMTP_PORT = String(await freePort());
  target.MAILBOX_HTTP_PORT = String(await freePort());
  target.SMTP_URL = `smtp://127.0.0.1:${target.MAILBOX_SMTP_PORT}`;
  target.MAILBOX_URL = `http://127.0.0.1:${target.MAILBOX_HTTP_PORT}`;
}

/** Says where to go once both servers answer. */
async function announce() {
  for (let tries = 0; tries < 300 && !stopping; tries++) {
    const [web, realtime] = await Promise.all(
      [`http://${host}:${port}/api/health`, `http://${host}:${realtimePort}/health`].map((url) =>
        fetch(url).then(
          (r) => r.ok,
          () => false,
        ),
      ),
    );
    if (web && realtime) return log(`ready on ${here}${target()}. Ctrl-C stops everything.`);
    await wait(200);
  }
  if (!stopping) log("still not answering after a minute; the lines above may say why");
}

function target() {
  return environment.MAILBOX_URL ? ` (mail arrives at ${here}/mail)` : "";
}
