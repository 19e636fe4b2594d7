import { spawn, spawnSync, type ChildProcessWithoutNullStreams } from "node:child_process";
import { existsSync } from "node:fs";
import path from "node:path";
import { createInterface, type Interface } from "node:readline";

const modules = ["numpy", "scipy", "uncertainties"] as const;
const packages = modules.map((name) => `python3-${name}`);
/** The system's own Python, which sees the system's packages; another one may stand before it in the path. */
const candidates = ["/usr/bin/python3", "python3"] as const;

export type Task = "plain" | "log" | "uncertainties" | "odr" | "odr correlated";

/** A Python that has all of what is compared with; the packages are installed where they are missing and that is possible. */
export function findPython(): { readonly command: string } | { readonly missing: string } {
  const found = candidates.find(hasAll);
  if (found !== undefined) return { command: found };
  const why = install();
  const after = candidates.find(hasAll);
  if (after !== undefined) return { command: after };
  return {
    missing: `Nothing is compared with numpy, scipy and uncertainties: ${why ?? "they cannot be imported even after installing them"}. Install ${packages.join(", ")} and run this again.`,
  };
}

function hasAll(command: string): boolean {
  return spawnSync(command, ["-c", `import ${modules.join(", ")}`]).status === 0;
}

/** Installs Debian's packages. Returns why it could not, in words. */
function install(): string | undefined {
  if (!existsSync("/usr/bin/apt-get")) return "they are missing and this machine has no apt-get";
  const root = process.getuid?.() === 0;
  if (!root && spawnSync("sudo", ["-n", "true"]).status !== 0) return "they are missing, and installing them needs root or sudo without a password";
  console.error(`Installing ${packages.join(", ")} …`);
  const apt = (...rest: string[]): boolean => {
    const command = ["apt-get", "-q", "-y", ...rest];
    const [first = "", ...others] = root ? command : ["sudo", "-n", "DEBIAN_FRONTEND=noninteractive", ...command];
    return spawnSync(first, others, { env: { ...process.env, DEBIAN_FRONTEND: "noninteractive" } }).status === 0;
  };
  const wanted = ["install", "--no-install-recommends", ...packages];
  return apt(...wanted) || (apt("update") && apt(...wanted)) ? undefined : "they are missing and apt-get could not install them";
}

/**
 * The other side. What is timed runs in a process of its own for each task and size, and what is checked in yet another, so that
 * numpy's memory is in the state that a script of this calculation alone would leave it in: glibc keeps or returns freed memory
 * by what was freed before.
 */
export class Python {
  readonly #command: string;
  #timed: { readonly of: string; readonly process: PythonProcess } | undefined;

  constructor(command: string) {
    this.#command = command;
  }

  /** Writes the task's results, one column after the other as doubles, to a file. */
  async results(task: Task, file: string, rows: number, to: string): Promise<void> {
    const process = new PythonProcess(this.#command);
    try {
      await process.ask({ ask: "results", task, file, rows, to });
    } finally {
      process.close();
    }
  }

  /** Seconds of one call, the mean of `calls`. */
  async seconds(task: Task, file: string, rows: number, calls: number): Promise<number> {
    const of = `${task} ${file}`;
    if (this.#timed?.of !== of) {
      this.close();
      this.#timed = { of, process: new PythonProcess(this.#command) };
    }
    const { seconds } = await this.#timed.process.ask({ ask: "seconds", task, file, rows, calls });
    if (typeof seconds !== "number") throw new Error("expected seconds from the calculation in Python");
    return seconds;
  }

  close(): void {
    this.#timed?.process.close();
    this.#timed = undefined;
  }
}

/** One running process, which answers one request at a time. */
class PythonProcess {
  readonly #process: ChildProcessWithoutNullStreams;
  readonly #lines: Interface;
  #errors = "";

  constructor(command: string) {
    this.#process = spawn(command, [path.resolve(import.meta.dirname, "reference.py")], {
      // One thread on either side.
      env: { ...process.env, OMP_NUM_THREADS: "1", OPENBLAS_NUM_THREADS: "1" },
    });
    this.#process.stderr.on("data", (data: Buffer) => (this.#errors += data.toString("utf8")));
    this.#lines = createInterface({ input: this.#process.stdout });
  }

  close(): void {
    this.#lines.close();
    this.#process.stdin.end();
  }

  ask(request: object): Promise<{ readonly seconds?: unknown }> {
    return new Promise((resolve, reject) => {
      const ended = (): void => {
        reject(new Error(`the calculation in Python failed: ${this.#errors}`));
      };
      this.#process.once("close", ended);
      this.#lines.once("line", (line) => {
        this.#process.off("close", ended);
        resolve(JSON.parse(line) as { readonly seconds?: unknown });
      });
      this.#process.stdin.write(`${JSON.stringify(request)}\n`);
    });
  }
}
