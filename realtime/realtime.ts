import { createServer, type IncomingMessage, type Server, type ServerResponse } from "node:http";
import type { AddressInfo } from "node:net";
import type { Duplex } from "node:stream";
import { WebSocketServer, type WebSocket } from "ws";
import { connect, type Connection as DatabaseConnection } from "@/db/client";
import { ACCESS_CHANNEL } from "@/db/queries/accessEvents";
import { admit } from "./access/door";
import { Listener } from "./access/listener";
import { AccessWatch } from "./access/watch";
import { InProcessBus } from "./bus/inProcess";
import { ConfigError, type RealtimeConfig } from "./config";
import { closeReason, Connection } from "./connection/connection";
import { Presence } from "./connection/presence";
import { readUpgrade } from "./connection/upgrade";
import { PAGES_CHANNEL, readPageNotice } from "./pageNotices";
import { Close, closeSentences, encodeAnnouncement, type CloseCode } from "./protocol";
import { Rooms } from "./room/rooms";
import type { Room } from "./room/room";
import { PostgresStorage } from "./storage/postgres";

/** Frames larger than this end the connection before anything is read. A step 2 of the largest size fits well. */
const MOST_FRAME = 12 << 20;

export interface RunningRealtime {
  readonly port: number;
  /** Stores what is on its way, shows everybody out, and ends. */
  close(): Promise<void>;
}

/** @throws ConfigError where the database would call an edit stored before it is */
async function refuseForgetfulDatabase(database: DatabaseConnection): Promise<void> {
  const result = await database.pool.query<{ synchronous_commit: string }>("show synchronous_commit");
  if (result.rows[0]?.synchronous_commit === "off") {
    throw new ConfigError(
      "The database has synchronous_commit switched off: it would call an edit saved before it is on the disk. Switch it on for this database and start again.",
    );
  }
}

/** Starts the realtime server. @throws ConfigError with a sentence where it cannot */
export async function startRealtime(config: RealtimeConfig): Promise<RunningRealtime> {
  const database = connect(config.databaseUrl, 8);
  try {
    await refuseForgetfulDatabase(database);
  } catch (error) {
    await database.end();
    throw error;
  }
  const realtime = new Realtime(config, database);
  try {
    await realtime.listen();
  } catch (error) {
    await realtime.close();
    throw error;
  }
  return realtime;
}

class Realtime implements RunningRealtime {
  port = 0;
  private readonly http: Server;
  private readonly sockets = new WebSocketServer({ noServer: true, perMessageDeflate: false, maxPayload: MOST_FRAME });
  private readonly connections = new Set<Connection>();
  private readonly presences = new WeakMap<Room, Presence>();
  private readonly rooms: Rooms;
  private readonly storage: PostgresStorage;
  private readonly watch: AccessWatch;
  private readonly listener: Listener;
  private readonly heart: NodeJS.Timeout;
  private isClosing = false;

  constructor(
    private readonly config: RealtimeConfig,
    private readonly database: DatabaseConnection,
  ) {
    this.storage = new PostgresStorage(database, config.databaseUrl);
    this.rooms = new Rooms(this.storage, new InProcessBus(), `${process.pid.toString()}-${Date.now().toString(36)}`, config.times);
    this.watch = new AccessWatch(database.db, () => this.connections, config.times.recheckMs);
    this.listener = new Listener(
      config.databaseUrl,
      [ACCESS_CHANNEL, PAGES_CHANNEL],
      (channel, payload) => {
        if (channel === ACCESS_CHANNEL) void this.watch.look(payload);
        else this.hear(payload);
      },
      () => {
        void this.watch.look(null);
        for (const room of this.rooms.all) room.refresh();
      },
    );
    this.heart = setInterval(() => {
      for (const connection of this.connections) connection.beat();
    }, config.times.heartbeatMs);
    this.http = createServer((request, response) => void this.answer(request, response));
    this.http.on("upgrade", (request, socket, head) => {
      this.upgrade(request, socket, head);
    });
  }

  async listen(): Promise<void> {
    const { host, port } = this.config;
    await new Promise<void>((resolve, reject) => {
      this.http.once("error", (error: NodeJS.ErrnoException) => {
        const taken = error.code === "EADDRINUSE";
        reject(taken ? new ConfigError(`Port ${port.toString()} is taken by another program. Name a free one with REALTIME_PORT.`) : error);
      });
      this.http.listen(port, host, resolve);
    });
    this.port = (this.http.address() as AddressInfo).port;
    await this.listener.open();
  }

  private async answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    if (request.url !== "/health") {
      response.writeHead(404, { "content-type": "text/plain" }).end("This is the realtime server; pages connect to it by WebSocket.\n");
      return;
    }
    const isWell = await this.database.pool.query("select 1").then(
      () => true,
      () => false,
    );
    const body = { status: isWell ? "ok" : "no database", pages: this.rooms.all.length, connections: this.connections.size };
    response.writeHead(isWell ? 200 : 503, { "content-type": "application/json", "cache-control": "no-store" }).end(JSON.stringify(body));
  }

  private upgrade(request: IncomingMessage, socket: Duplex, head: Buffer): void {
    // From the first moment: a broken connection must never be an error without a listener.
    socket.on("error", () => socket.destroy());
    this.sockets.handleUpgrade(request, socket, head, (ws) => {
      ws.on("error", () => ws.terminate());
      // Nothing is read, and so nothing has to be kept, before it is known who it is and the page is loaded.
      ws.pause();
      void this.receive(ws, request).catch((error: unknown) => {
        console.error("A connection could not be opened:", error instanceof Error ? error.message : error);
        turnAway(ws, Close.notDurable, "The server cannot reach its database just now. The page connects again by itself.");
      });
    });
  }

  private async receive(ws: WebSocket, request: IncomingMessage): Promise<void> {
    // The refusal is said by a close code: a browser cannot see why a handshake failed.
    const asked = readUpgrade(request, this.config.origins, this.config.secure);
    if (asked.is === "refused") {
      turnAway(ws, asked.code, asked.reason);
      return;
    }
    if (this.isClosing) {
      turnAway(ws, Close.restarting);
      return;
    }
    const admission = await admit(this.database.db, asked.credentials, asked.pageId);
    if (admission.is === "turned away") {
      turnAway(ws, admission.code, admission.reason);
      return;
    }
    if (admission.epoch !== asked.epoch) {
      turnAway(ws, Close.epochChanged);
      return;
    }
    // Somebody who lost the right to edit while offline is told so, and keeps what they had as a draft (rule A6).
    if (asked.toEdit && !admission.mayEdit) {
      turnAway(ws, Close.roleChanged);
      return;
    }
    const banned = admission.userId === null ? 0 : this.rooms.bannedFor(asked.pageId, admission.userId);
    if (banned > 0) {
      turnAway(ws, Close.tooFast, `An edit of yours was refused a moment ago. You can connect again in ${Math.ceil(banned / 1000).toString()} s.`);
      return;
    }
    if (ws.readyState !== ws.OPEN) return;
    const connection = new Connection(ws, asked.pageId, asked.credentials, admission, (expired) => void this.watch.lookAt(expired));
    this.connections.add(connection);
    ws.on("message", (data: Buffer, isBinary) => {
      connection.take(data, isBinary);
    });
    ws.on("pong", () => {
      connection.heard();
    });
    ws.on("close", () => {
      connection.gone();
      this.connections.delete(connection);
      const room = this.rooms.find(connection.pageId);
      if (room?.members.size === 0) this.rooms.leaveSoon(room);
    });
    await this.enter(connection);
    ws.resume();
  }

  private async enter(connection: Connection): Promise<void> {
    let room = await this.rooms.get(connection.pageId);
    // It may have left memory while we waited for it.
    while (room?.isRemoved === true) room = await this.rooms.get(connection.pageId);
    if (room === null) connection.close(Close.notFound);
    else if (room.epoch !== connection.admission.epoch) connection.close(Close.epochChanged);
    else if (connection.isOpen) connection.enter({ room, presence: this.presenceOf(room) });
  }

  private presenceOf(room: Room): Presence {
    let presence = this.presences.get(room);
    if (presence === undefined) this.presences.set(room, (presence = new Presence()));
    return presence;
  }

  /** Something happened to a page elsewhere: in the web process, or beside the document (rule A7). */
  private hear(payload: unknown): void {
    const notice = readPageNotice(payload);
    if (notice === null) return;
    const room = this.rooms.find(notice.pageId);
    if (room === undefined) return;
    if (notice.kind === "edits") room.takeCommitted(notice.seqs.map(BigInt));
    else if (notice.kind === "epoch") room.fail(Close.epochChanged, null);
    else for (const member of room.members) member.send(encodeAnnouncement({ kind: notice.kind }));
  }

  async close(): Promise<void> {
    if (this.isClosing) return;
    this.isClosing = true;
    clearInterval(this.heart);
    this.watch.close();
    await this.rooms.close();
    for (const connection of this.connections) connection.close(Close.restarting);
    await new Promise<void>((resolve) => {
      this.http.close(() => resolve());
      this.http.closeAllConnections();
      // Sockets that do not answer their close are not waited for.
      setTimeout(() => {
        for (const ws of this.sockets.clients) ws.terminate();
        resolve();
      }, 500).unref();
    });
    await this.listener.close();
    await this.storage.close();
    await this.database.end();
  }
}

function turnAway(ws: WebSocket, code: CloseCode, reason: string = closeSentences[code]): void {
  ws.close(code, closeReason(reason));
  ws.resume();
  setTimeout(() => ws.terminate(), 3000).unref();
}
