"use client";

import { useCallback, useEffect, useState } from "react";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { Select } from "@/app/_ui/Select";
import { TextField } from "@/app/_ui/TextField";
import type { LastSnapshot } from "../props";
import { dayOf } from "../times";
import { request } from "./request";

interface ReadingLink {
  readonly id: string;
  readonly kind: "page" | "snapshot";
  readonly number: number | null;
  readonly label: string;
  readonly state: "open" | "expired" | "withdrawn";
  readonly expiresAt: string;
  readonly lastUsedAt: string | null;
}

export interface LinksDialogProps {
  readonly pageId: string;
  /** The snapshot a new link opens, unless its maker chooses the live page. */
  readonly snapshot: LastSnapshot | null;
  readonly onClose: () => void;
}

const lengths = [
  { value: "7", label: "7 days" },
  { value: "30", label: "30 days" },
  { value: "90", label: "90 days" },
  { value: "365", label: "a year" },
] as const;

function opens(link: ReadingLink): string {
  return link.kind === "page" ? "the live page" : `snapshot ${link.number ?? ""}`;
}

/** Reading links of a page: make one, copy it once, see them all, withdraw them. */
export function LinksDialog({ pageId, snapshot, onClose }: LinksDialogProps) {
  const [links, setLinks] = useState<readonly ReadingLink[] | null>(null);
  const [to, setTo] = useState<"snapshot" | "page">(snapshot === null ? "page" : "snapshot");
  const [days, setDays] = useState<(typeof lengths)[number]["value"]>("30");
  const [label, setLabel] = useState("");
  const [made, setMade] = useState<string | null>(null);
  const [copied, setCopied] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);

  const run = useCallback(async (work: () => Promise<void>) => {
    setBusy(true);
    setFault(null);
    try {
      await work();
    } catch (error) {
      setFault(error instanceof Error ? error.message : "This could not be done.");
    } finally {
      setBusy(false);
    }
  }, []);
  const look = useCallback(async () => setLinks((await request<{ links: ReadingLink[] }>("GET", `/api/pages/${pageId}/links`)).links), [pageId]);
  useEffect(() => {
    let isOpen = true;
    request<{ links: ReadingLink[] }>("GET", `/api/pages/${pageId}/links`).then(
      (answer) => isOpen && setLinks(answer.links),
      (error: unknown) => isOpen && setFault(error instanceof Error ? error.message : "The links could not be fetched."),
    );
    return () => {
      isOpen = false;
    };
  }, [pageId]);

  const make = () =>
    run(async () => {
      const answer = await request<{ url: string }>("POST", `/api/pages/${pageId}/links`, {
        kind: to,
        ...(to === "snapshot" && snapshot !== null ? { snapshotId: snapshot.id } : {}),
        days: Number(days),
        ...(label.trim() === "" ? {} : { label: label.trim() }),
      });
      setMade(answer.url);
      setCopied(false);
      await look();
    });
  const withdraw = (id: string) =>
    run(async () => {
      await request("DELETE", `/api/pages/${pageId}/links/${id}`);
      await look();
    });
  const copy = async () => {
    if (made === null) return;
    try {
      await navigator.clipboard.writeText(made);
      setCopied(true);
    } catch {
      setFault("The browser did not allow copying. Select the address and copy it by hand.");
    }
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title="Reading links"
      says="A guest with the link reads without an account and changes nothing. Guests see neither each other nor you, and you do not see them."
    >
      <form
        className="grid grid-cols-[1fr_1fr] gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          void make();
        }}
      >
        <Select
          label="Opens"
          value={to}
          options={[
            ...(snapshot === null ? [] : [{ value: "snapshot" as const, label: `snapshot ${snapshot.number}` }]),
            { value: "page" as const, label: "the live page, as it changes" },
          ]}
          onChoose={setTo}
          hint={snapshot === null ? "Freeze the page first to hand out a snapshot." : undefined}
        />
        <Select label="Good for" value={days} options={lengths} onChoose={setDays} />
        <TextField
          label="For whom, as a note to yourselves"
          value={label}
          maxLength={120}
          onText={setLabel}
          placeholder="referee 2"
          fieldClassName="col-span-2"
        />
        <div className="col-span-2">
          <Button type="submit" look="main" disabled={busy}>
            Make the link
          </Button>
        </div>
      </form>
      {made === null ? null : (
        <div className="mt-4 border-t border-b border-ink py-3">
          <p className="text-margin text-second">This address is shown once and cannot be looked up again.</p>
          <div className="mt-1 flex items-baseline gap-4">
            <input
              readOnly
              value={made}
              aria-label="Address of the reading link"
              className="min-w-0 flex-1 border-0 bg-transparent font-mono text-[12px]"
              onFocus={(event) => event.target.select()}
            />
            <Button onClick={() => void copy()}>{copied ? "Copied" : "Copy"}</Button>
          </div>
        </div>
      )}
      {fault === null ? null : (
        <p role="alert" className="mt-3 text-vermilion">
          {fault}
        </p>
      )}
      <h3 className="mt-6 text-block font-semibold">Handed out</h3>
      {links === null ? (
        <p className="text-second">Fetching.</p>
      ) : links.length === 0 ? (
        <p className="text-second">None yet.</p>
      ) : (
        <ul className="mt-1 border-t border-ink">
          {links.map((link) => (
            <li key={link.id} className={`flex items-baseline gap-3 border-b border-hairline py-1.5 ${link.state === "open" ? "" : "text-second"}`}>
              <span className="min-w-0 flex-1 truncate">
                {link.label === "" ? "without a note" : link.label}, {opens(link)}
              </span>
              <span className="text-margin text-second">
                {link.state === "withdrawn"
                  ? "withdrawn"
                  : link.state === "expired"
                    ? `ended ${dayOf(link.expiresAt)}`
                    : `until ${dayOf(link.expiresAt)}${link.lastUsedAt === null ? ", not used yet" : ""}`}
              </span>
              {link.state === "open" ? (
                <Button look="danger" disabled={busy} aria-label={`Withdraw the link ${link.label}`} onClick={() => void withdraw(link.id)}>
                  Withdraw
                </Button>
              ) : null}
            </li>
          ))}
        </ul>
      )}
    </Dialog>
  );
}
