import { ConfigError, readConfig } from "./config";
import { startRealtime } from "./realtime";

/** The realtime process: `node --import tsx realtime/server.ts`. SIGTERM stores what is on its way, then ends. */
try {
  const realtime = await startRealtime(readConfig(process.env));
  let isStopping = false;
  for (const signal of ["SIGTERM", "SIGINT"] as const) {
    process.on(signal, () => {
      if (isStopping) return;
      isStopping = true;
      void realtime.close().then(
        () => process.exit(0),
        (error: unknown) => {
          console.error("cotectic realtime: the end was not clean:", error);
          process.exit(1);
        },
      );
    });
  }
  // Whoever started this process waits for it.
  console.log(`cotectic realtime: ready on port ${realtime.port.toString()}`);
} catch (error) {
  console.error(
    `cotectic realtime: ${error instanceof ConfigError ? error.message : `it could not start: ${error instanceof Error ? error.message : String(error)}`}`,
  );
  process.exit(1);
}
