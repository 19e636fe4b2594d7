"use client";

import { useSyncExternalStore } from "react";

export interface WhenProps {
  /** ISO 8601, UTC. */
  readonly iso: string;
  /** `day`: 21 November 2026; `moment`: with the time when it was today or yesterday. */
  readonly as?: "day" | "moment";
}

const never = () => () => undefined;

/** A moment in words. The server writes it in UTC; the browser writes it anew in the person's own time. */
export function When({ iso, as = "moment" }: WhenProps) {
  const words = useSyncExternalStore(
    never,
    () => inWords(new Date(iso), new Date(), as),
    () => inWords(new Date(iso), new Date(), as, "UTC"),
  );
  return (
    <time dateTime={iso} suppressHydrationWarning>
      {words}
    </time>
  );
}

/** "14:32 today", "yesterday", "18 November", "3 March 2025". Exported for its test. */
export function inWords(at: Date, now: Date, as: "day" | "moment", timeZone?: string): string {
  const zone = timeZone === undefined ? {} : { timeZone };
  const day = (date: Date) => new Intl.DateTimeFormat("en-GB", { ...zone, year: "numeric", month: "2-digit", day: "2-digit" }).format(date);
  const year = (date: Date) => new Intl.DateTimeFormat("en-GB", { ...zone, year: "numeric" }).format(date);
  if (as === "moment") {
    if (day(at) === day(now)) return `${new Intl.DateTimeFormat("en-GB", { ...zone, hour: "2-digit", minute: "2-digit", hourCycle: "h23" }).format(at)} today`;
    if (day(at) === day(new Date(now.getTime() - 86_400_000))) return "yesterday";
    if (year(at) === year(now)) return new Intl.DateTimeFormat("en-GB", { ...zone, day: "numeric", month: "long" }).format(at);
  }
  return new Intl.DateTimeFormat("en-GB", { ...zone, day: "numeric", month: "long", year: "numeric" }).format(at);
}
