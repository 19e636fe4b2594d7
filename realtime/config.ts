/** Settings of the realtime server, from the environment. */
export interface RealtimeConfig {
  readonly databaseUrl: string;
  readonly host: string;
  readonly port: number;
  /** Origins whose pages may open sockets. */
  readonly origins: readonly string[];
  /** True where the product is reached over https: the cookies' names say so. */
  readonly secure: boolean;
  readonly times: RealtimeTimes;
}

/** Times that tests shorten. */
export interface RealtimeTimes {
  readonly heartbeatMs: number;
  /** How often who may do what is read again, in case a notice was missed (rule A3). */
  readonly recheckMs: number;
  /** How long a page stays in memory after the last person left. */
  readonly lingerMs: number;
  /** How long somebody whose edit had a bad shape is kept out (rule H2). */
  readonly banMs: number;
  /** Log rows after which a page is folded (rule S6). */
  readonly compactRows: number;
}

export const usualTimes: RealtimeTimes = { heartbeatMs: 15_000, recheckMs: 10_000, lingerMs: 30_000, banMs: 30_000, compactRows: 500 };

/** Thrown where the server cannot start; the sentence says why. */
export class ConfigError extends Error {
  override readonly name = "ConfigError";
}

/** @throws ConfigError in a sentence */
export function readConfig(environment: Readonly<Record<string, string | undefined>>): RealtimeConfig {
  const databaseUrl = environment.DATABASE_URL;
  if (databaseUrl === undefined || databaseUrl === "")
    throw new ConfigError("DATABASE_URL is not set: the realtime server keeps pages in PostgreSQL and needs its address.");
  const port = Number(environment.REALTIME_PORT ?? 3001);
  if (!Number.isInteger(port) || port < 0 || port > 65_535)
    throw new ConfigError(`REALTIME_PORT is ${environment.REALTIME_PORT ?? ""}, which is no port. Give a number from 1 to 65535.`);
  const origins = (environment.APP_ORIGIN ?? environment.NEXTAUTH_URL ?? "")
    .split(",")
    .map((origin) => origin.trim())
    .filter((origin) => origin !== "")
    .map(originOf);
  if (origins.length === 0)
    throw new ConfigError("APP_ORIGIN is not set: name the addresses people open the product at, such as https://cotectic.example.org, with commas between.");
  const secure = environment.NEXTAUTH_URL?.startsWith("https://") ?? false;
  return { databaseUrl, host: environment.REALTIME_HOST ?? "127.0.0.1", port, origins, secure, times: usualTimes };
}

function originOf(text: string): string {
  if (!URL.canParse(text)) throw new ConfigError(`APP_ORIGIN names ${text}, which is no address. Write it like https://cotectic.example.org.`);
  return new URL(text).origin;
}
