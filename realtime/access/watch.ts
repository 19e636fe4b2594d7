import type { Database } from "@/db/client";
import { Close } from "../protocol";
import type { Connection } from "../connection/connection";
import { admit } from "./door";

/** How many are looked up at once. */
const AT_ONCE = 4;

/** Whether a notice of the channel `access` is about this connection. A notice that says nothing is about everybody. */
function concerns(notice: unknown, { admission, pageId }: Connection): boolean {
  if (typeof notice !== "object" || notice === null) return true;
  const said = notice as Readonly<Record<string, unknown>>;
  const own: Readonly<Record<string, unknown>> = { groupId: admission.groupId, pageId, userId: admission.userId, linkId: admission.linkId };
  // What a notice names narrows it: a person in a group is that person, in that group.
  return Object.entries(own).every(([key, value]) => said[key] === undefined || said[key] === value);
}

/**
 * Looks again at who may be where (rule A3): after a notice at once, all of them every few seconds in case one was missed,
 * and each when its own time is up.
 */
export class AccessWatch {
  private readonly timer: NodeJS.Timeout;
  private isLooking = false;

  constructor(
    private readonly db: Database,
    private readonly connections: () => Iterable<Connection>,
    recheckMs: number,
  ) {
    this.timer = setInterval(() => {
      if (!this.isLooking) void this.look(null);
    }, recheckMs);
    this.timer.unref();
  }

  /** Looks again at everybody whom a notice concerns. */
  async look(notice: unknown): Promise<void> {
    this.isLooking = true;
    const waiting = [...this.connections()].filter((connection) => concerns(notice, connection));
    const worker = async (): Promise<void> => {
      for (let next = waiting.pop(); next !== undefined; next = waiting.pop()) await this.lookAt(next);
    };
    await Promise.all(Array.from({ length: AT_ONCE }, worker));
    this.isLooking = false;
  }

  /** Looks again at one; called by its own timer too. */
  async lookAt(connection: Connection): Promise<void> {
    if (!connection.isOpen) return;
    try {
      const now = await admit(this.db, connection.credentials, connection.pageId);
      if (now.is === "turned away") connection.close(now.code, now.reason);
      else if (now.epoch !== connection.admission.epoch) connection.close(Close.epochChanged);
      else if (now.role !== connection.admission.role || now.mayEdit !== connection.admission.mayEdit) connection.close(Close.roleChanged);
      else connection.renew(now);
    } catch {
      // The database does not answer: the flush asks it again before anything is stored, and the next look comes soon.
    }
  }

  close(): void {
    clearInterval(this.timer);
  }
}
