import { spawn, type ChildProcess } from "node:child_process";
import { connect, createServer, type AddressInfo, type Server, type Socket } from "node:net";
import path from "node:path";
import { ORIGIN } from "./live";

const root = path.resolve(import.meta.dirname, "../../..");

export interface ServerProcess {
  readonly port: number;
  readonly child: ChildProcess;
  /** Ends it as a power cut would. */
  kill(): Promise<void>;
  /** Asks it to end; gives its exit code. */
  stop(): Promise<number | null>;
}

/** A real `realtime/server.ts`, on a port it chooses itself. */
export function serverProcess(databaseUrl: string, environment: Readonly<Record<string, string>> = {}): Promise<ServerProcess> {
  const child = spawn(process.execPath, ["--import", "tsx", "realtime/server.ts"], {
    cwd: root,
    env: {
      PATH: process.env.PATH,
      HOME: process.env.HOME,
      DATABASE_URL: databaseUrl,
      REALTIME_PORT: "0",
      APP_ORIGIN: ORIGIN,
      ...environment,
    } as unknown as NodeJS.ProcessEnv,
    stdio: ["ignore", "pipe", "pipe"],
  });
  const gone = new Promise<number | null>((resolve) => child.once("exit", (code) => resolve(code)));
  let said = "";
  return new Promise((resolve, reject) => {
    const hear = (bytes: Buffer): void => {
      said += bytes.toString();
      const port = /ready on port (\d+)/.exec(said)?.[1];
      if (port === undefined) return;
      resolve({
        port: Number(port),
        child,
        kill: async () => {
          child.kill("SIGKILL");
          await gone;
        },
        stop: () => {
          child.kill("SIGTERM");
          return gone;
        },
      });
    };
    child.stdout.on("data", hear);
    child.stderr.on("data", hear);
    void gone.then((code) => reject(new Error(`the server ended with ${String(code)}: ${said}`)));
  });
}

/** One address that leads to whichever server is up, as a proxy in front of them would. */
export class Relay {
  port = 0;
  private target: number | null = null;
  private readonly sockets = new Set<Socket>();
  private readonly server: Server = createServer((near) => {
    if (this.target === null) {
      near.destroy();
      return;
    }
    const far = connect(this.target, "127.0.0.1");
    for (const [one, other] of [
      [near, far],
      [far, near],
    ] as const) {
      this.sockets.add(one);
      one.on("error", () => other.destroy());
      one.on("close", () => {
        this.sockets.delete(one);
        other.destroy();
      });
      one.pipe(other);
    }
  });

  async open(): Promise<this> {
    await new Promise<void>((resolve) => this.server.listen(0, "127.0.0.1", resolve));
    this.port = (this.server.address() as AddressInfo).port;
    return this;
  }

  /** Leads there from now on; `null` for nowhere. Open connections stay. */
  lead(port: number | null): void {
    this.target = port;
  }

  /** Cuts every connection, as a network that fails. */
  cut(): void {
    for (const socket of this.sockets) socket.destroy();
  }

  async close(): Promise<void> {
    this.cut();
    await new Promise<void>((resolve) => this.server.close(() => resolve()));
  }
}
