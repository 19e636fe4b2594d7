import pg from "pg";

const RETRY_MS = 1000;

/**
 * Listens to notices of the database on a connection of its own, and opens another when that one is lost.
 *
 * @param onNotice a notice, its payload parsed; `null` where it cannot be
 * @param onBack called when listening began again after it was interrupted: notices may have been missed
 */
export class Listener {
  private client: pg.Client | null = null;
  private timer: NodeJS.Timeout | null = null;
  private isClosed = false;
  private wasOpen = false;

  constructor(
    private readonly databaseUrl: string,
    private readonly channels: readonly string[],
    private readonly onNotice: (channel: string, payload: unknown) => void,
    private readonly onBack: () => void,
  ) {}

  /** Fulfilled once the first attempt was made. */
  async open(): Promise<void> {
    if (this.isClosed) return;
    const client = new pg.Client({ connectionString: this.databaseUrl, keepAlive: true });
    this.client = client;
    let isLost = false;
    const lost = (): void => {
      if (isLost) return;
      isLost = true;
      void client.end().catch(() => undefined);
      if (this.client === client) this.client = null;
      this.retry();
    };
    client.on("error", lost);
    client.on("end", lost);
    client.on("notification", ({ channel, payload }) => {
      this.onNotice(channel, parse(payload));
    });
    try {
      await client.connect();
      for (const channel of this.channels) await client.query(`listen ${pg.escapeIdentifier(channel)}`);
    } catch {
      lost();
      return;
    }
    if (this.wasOpen) this.onBack();
    this.wasOpen = true;
  }

  private retry(): void {
    if (this.isClosed || this.timer !== null) return;
    this.timer = setTimeout(() => {
      this.timer = null;
      void this.open();
    }, RETRY_MS);
    this.timer.unref();
  }

  async close(): Promise<void> {
    this.isClosed = true;
    if (this.timer !== null) clearTimeout(this.timer);
    await this.client?.end().catch(() => undefined);
  }
}

function parse(payload: string | undefined): unknown {
  try {
    return JSON.parse(payload ?? "null");
  } catch {
    return null;
  }
}
