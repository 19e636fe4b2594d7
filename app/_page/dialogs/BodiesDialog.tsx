"use client";

import { useEffect, useMemo, useState } from "react";
import { Button } from "@/app/_ui/Button";
import { Dialog } from "@/app/_ui/Dialog";
import { Select } from "@/app/_ui/Select";
import { controlLook } from "@/app/_ui/TextField";
import { bodyLookup, handleSchema, isFromMemory, isOwnBodyId, type Body, type OwnBody } from "@/cells";
import { usePage } from "../pageContext";
import { request } from "./request";

/** An own body of the group, as the server lists it. */
interface Offered {
  readonly id: string;
  readonly code: string;
  readonly version: number;
  readonly body: OwnBody;
}

/** Which compilation each name means on this page. An unnamed CI is a wrong number waiting. */
export function BodiesDialog({ onClose }: { readonly onClose: () => void }) {
  const bodies = usePage((s) => s.bodies);
  const edits = usePage((s) => s.edits);
  const [rows, setRows] = useState(() => Object.entries(bodies).map(([alias, id]) => ({ alias, id })));
  const [fault, setFault] = useState<string | null>(null);
  const carried = usePage((s) => s.ownBodies);
  const pageId = usePage((s) => s.pageId);
  const [offered, setOffered] = useState<readonly Offered[]>([]);
  useEffect(() => {
    let isOpen = true;
    request<{ bodies: readonly Offered[] }>("GET", `/api/pages/${pageId}/bodies`)
      .then(({ bodies: found }) => (isOpen ? setOffered(found) : undefined))
      .catch(() =>
        isOpen
          ? setFault("The bodies of your group could not be fetched. Those on this page and the built-in ones are here; open this again for the others.")
          : undefined,
      );
    return () => void (isOpen = false);
  }, [pageId]);
  /** The group's newest versions and whatever the page has already, before the built-in ones. */
  const { find, known, newest } = useMemo(() => {
    const first = new Map<string, Offered>();
    for (const each of offered) if (!first.has(each.code)) first.set(each.code, each);
    const own = { ...Object.fromEntries([...first.values()].map(({ id, body }) => [id, body])), ...carried };
    const lookup = bodyLookup({}, own);
    const listed = [...lookup.all].filter((body) => body.kind !== "phase").sort((a, b) => Number(isOwnBodyId(b.id)) - Number(isOwnBodyId(a.id)));
    return { find: lookup, known: listed.map((body) => ({ value: body.id, label: label(body) })), newest: first };
  }, [offered, carried]);
  const save = () => {
    const wrong = rows.find((row) => !handleSchema.safeParse(row.alias).success);
    if (wrong !== undefined) return setFault(`“${wrong.alias}” cannot be a name: letters, digits and _ only, and no digit first.`);
    const twice = rows.find((row, i) => rows.some((other, j) => j < i && other.alias === row.alias));
    if (twice !== undefined) return setFault(`Two bodies are called ${twice.alias}.`);
    try {
      const copies = offered.filter(({ id }) => carried[id] === undefined && rows.some((row) => row.id === id));
      edits?.setBodies(Object.fromEntries(rows.map((row) => [row.alias, row.id])), Object.fromEntries(copies.map(({ id, body }) => [id, body])));
      onClose();
    } catch (error) {
      setFault(error instanceof Error ? error.message : "This could not be changed.");
    }
  };
  const set = (i: number, change: Partial<{ alias: string; id: string }>) => {
    setFault(null);
    setRows((old) => old.map((row, j) => (j === i ? { ...row, ...change } : row)));
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title="Bodies of this page"
      says="Which compilation a name means in every formula, plot, trend and budget here. Changing one recalculates the page."
      actions={
        <>
          <Button look="quiet" onClick={onClose}>
            Leave it
          </Button>
          <Button look="main" onClick={save}>
            Use these
          </Button>
        </>
      }
    >
      <ul className="flex flex-col gap-4">
        {rows.map((row, i) => (
          <li key={i} className="grid grid-cols-[88px_auto_minmax(0,1fr)_auto] items-center gap-x-3 phone:grid-cols-[64px_auto_minmax(0,1fr)]">
            <input
              aria-label={`Name ${i + 1}`}
              className={`${controlLook} font-mono`}
              value={row.alias}
              maxLength={40}
              onChange={(event) => set(i, { alias: event.target.value })}
            />
            <span className="text-second">is</span>
            <Select
              aria-label={`Compilation that ${row.alias} means`}
              value={row.id}
              options={known.some((k) => k.value === row.id) ? known : [{ value: row.id, label: `${row.id} (not known)` }, ...known]}
              onChoose={(id) => set(i, { id })}
              aria-describedby={`body-${i}`}
            />
            <Button
              look="quiet"
              className="phone:order-last phone:col-span-full phone:text-margin"
              aria-label={`Take off ${row.alias}`}
              onClick={() => setRows((old) => old.filter((_, j) => j !== i))}
            >
              Take off
            </Button>
            <p id={`body-${i}`} className="col-span-full pt-1 text-margin wrap-anywhere text-second">
              <About body={find(row.id)} newer={newerThan(row.id, offered, newest)} onNewer={(id) => set(i, { id })} />
            </p>
          </li>
        ))}
      </ul>
      <Button
        className="mt-3"
        onClick={() =>
          setRows((old) => [
            ...old,
            {
              alias: old.some((r) => r.alias === "CI") ? (old.some((r) => r.alias === "BSE") ? "" : "BSE") : "CI",
              id: old.some((r) => r.alias === "CI") ? "BSE_MS95" : "CI_PLJ14",
            },
          ])
        }
      >
        Add a body
      </Button>
      {fault === null ? null : (
        <p role="alert" className="mt-3 text-vermilion">
          {fault}
        </p>
      )}
    </Dialog>
  );
}

function label(body: Body): string {
  const own = isOwnBodyId(body.id) ? ", your group’s own" : "";
  const n = remembered(body).length;
  const memory = n === 0 ? "" : n === body.values.length ? " (from memory)" : ` (${n} of ${body.values.length} from memory)`;
  return `${body.id}, ${body.what}${own}${memory}`;
}

function remembered(body: Body): readonly string[] {
  return body.values.filter(({ checked }) => isFromMemory(checked)).map(({ species }) => species);
}

/** The newest version of an own body, where it is not the chosen one. */
function newerThan(id: string, offered: readonly Offered[], newest: ReadonlyMap<string, Offered>): string | undefined {
  const code = offered.find((each) => each.id === id)?.code;
  const last = code === undefined ? undefined : newest.get(code)?.id;
  return last === id ? undefined : last;
}

/** Where the chosen compilation is from, and which of its values nobody looked up. */
function About({ body, newer, onNewer }: { readonly body: Body | undefined; readonly newer: string | undefined; onNewer(id: string): void }) {
  if (body === undefined) return <span className="text-vermilion">This page has no such body. Choose another.</span>;
  const memory = remembered(body);
  const [source] = body.values;
  return (
    <>
      {/* The list cuts a long name short. */}
      {isOwnBodyId(body.id) ? `${body.what}. ` : ""}
      {source?.source}
      {source === undefined ? "" : ". "}
      {memory.length === 0 ? null : (
        <span className="text-vermilion">
          {memory.length === body.values.length ? "All its values were" : `Its ${listed(memory)} ${memory.length === 1 ? "was" : "were"}`} written down from
          memory, not read in a copy of the source.{" "}
        </span>
      )}
      {newer === undefined ? null : (
        <>
          Your group has a newer version, {newer}.{" "}
          <Button className="text-margin" onClick={() => onNewer(newer)}>
            Choose it
          </Button>
        </>
      )}
    </>
  );
}

function listed(species: readonly string[]): string {
  const shown = species.length > 12 ? [...species.slice(0, 11), `${species.length - 11} more`] : species;
  return shown.length < 2 ? (shown[0] ?? "") : `${shown.slice(0, -1).join(", ")} and ${shown[shown.length - 1] ?? ""}`;
}
