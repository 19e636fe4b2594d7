"use client";

import Link from "next/link";
import { useCallback, useEffect, useMemo, useState } from "react";
import { Mark } from "@/app/_ui/icons";
import { counted } from "@/app/_ui/concise";
import { LightMenu } from "./head/LightMenu";
import { goToPlace } from "./goTo";
import { initialState } from "./initialState";
import { startPageEngine } from "./pageEngine";
import { PageProvider, usePage } from "./pageContext";
import { PageSheet } from "./PageSheet";
import { createPageStore, type PageActions } from "./pageStore";
import type { FrozenPageProps } from "./props";
import { SectionRail } from "./rail/SectionRail";
import { frozenSourceUrl } from "./sourceUrls";
import { stepFrom } from "./stepFrom";
import { dayOf, groupedHash, shortHash, sizeInWords } from "./times";
import { ShortcutsDialog } from "./dialogs/ShortcutsDialog";
import { useShortcuts } from "./useShortcuts";
import { switchProjector, useStoredSettings } from "./useSettings";
import "./page.css";

function FrozenTitle({ snapshot }: Pick<FrozenPageProps, "snapshot">) {
  const bodies = usePage((s) => s.bodies);
  return (
    <div className="span-12">
      <h1 className="font-serif text-title font-medium tracking-[-0.008em] phone:text-title-phone">{snapshot.title}</h1>
      {snapshot.people !== undefined && snapshot.people.length > 0 ? <p className="mt-2 font-serif text-note italic">{snapshot.people.join(", ")}</p> : null}
      <p className="mt-2 text-second">
        {Object.entries(bodies).map(([alias, id], i) => (
          <span key={alias}>
            {i > 0 ? ", " : ""}
            <b className="font-medium text-ink">{alias}</b> is <span className="font-mono text-[12px]">{id}</span>
          </span>
        ))}
        {Object.keys(bodies).length > 0 ? ". " : ""}
        {snapshot.previous ? (
          <>
            Follows no. {snapshot.previous.number} of {dayOf(snapshot.previous.frozenAt)},{" "}
            <span className="font-mono text-[12px]">{shortHash(snapshot.previous.hash)}</span>.
          </>
        ) : null}
      </p>
      {snapshot.note ? <p className="mt-2 max-w-[70ch] font-serif text-note-narrow">{snapshot.note}</p> : null}
    </div>
  );
}

function Beside({ snapshot, files }: Pick<FrozenPageProps, "snapshot" | "files">) {
  const engine = usePage((s) => s.results?.engine);
  return (
    <>
      <div className="margin-note">
        <b>Whole hash, SHA-256</b>
        <p className="font-mono break-all text-ink">{groupedHash(snapshot.hash)}</p>
      </div>
      <div className="margin-note">
        <b>Engine</b>
        <br />
        Frozen with {snapshot.engine}
        {engine === undefined ? "." : engine === snapshot.engine ? ", calculated here again with the same." : `, shown here as ${engine} calculates it.`}
      </div>
      <details className="margin-note">
        <summary>
          <b>In the bundle</b>, {counted(files.length, "file")}, {sizeInWords(files.reduce((sum, f) => sum + f.size, 0))}
        </summary>
        <ul className="mt-1 font-mono text-[11.5px] leading-[18px] text-ink">
          {files.map((file) => (
            <li key={file.path} className="flex justify-between gap-3">
              <span className="truncate">{file.path}</span>
              <span className="shrink-0 text-second">{sizeInWords(file.size)}</span>
            </li>
          ))}
        </ul>
      </details>
    </>
  );
}

/** A snapshot: the same views, framed by a double rule, with number, date and hash always in sight and nothing to edit. */
export function FrozenPage({ snapshot, groupName, groupId, role, document: page, files, guestUntil }: FrozenPageProps) {
  const [session] = useState(() => {
    let engine: ReturnType<typeof startPageEngine> | null = null;
    const actions: PageActions = {
      pick: () => undefined,
      trace: (request) => engine?.askTrace(request),
      nearest: (request) => engine?.nearest(request) ?? Promise.resolve(null),
      stopSimulation: (handle, isStopped) => engine?.stopSimulation(handle, isStopped),
      enter: () => undefined,
      undo: () => undefined,
      redo: () => undefined,
      show: (place) => {
        const key = store.get().blocks.find((b) => b.block.id === place.block)?.key;
        if (key !== undefined) goToPlace(key, place);
      },
    };
    const store = createPageStore(initialState({ pageId: snapshot.pageId, mode: "frozen", title: snapshot.title, document: page, me: null }), actions);
    const start = () => {
      engine = startPageEngine(store, frozenSourceUrl(snapshot.id, files));
      const { title, bodies, ownBodies, blocks } = store.get();
      engine.update({ title, bodies, ownBodies, blocks });
      return () => {
        engine?.stop();
        engine = null;
      };
    };
    return { store, start };
  });
  const { store, start } = session;
  useEffect(() => start(), [start]);
  useStoredSettings(store);
  const [keys, setKeys] = useState(false);
  const step = useCallback(
    (by: 1 | -1) =>
      stepFrom(
        store.get().blocks.map((b) => b.key),
        by,
      ),
    [store],
  );
  useShortcuts(
    useMemo(() => ({ projector: () => switchProjector(store), shortcuts: () => setKeys(true), step, letGo: () => store.actions.trace(null) }), [store, step]),
  );

  const seal = (
    <>
      <span className="font-serif text-[20px] leading-6 font-medium">Snapshot {snapshot.number}</span>
      <span>frozen {dayOf(snapshot.frozenAt)}</span>
      <span className="font-mono text-[12px]" title={snapshot.hash}>
        {shortHash(snapshot.hash)}
      </span>
    </>
  );
  const size = files.reduce((sum, file) => sum + file.size, 0);
  return (
    <PageProvider store={store}>
      <div className="frozen">
        <div className="frozen-frame">
          <div className="frozen-inner">
            <div className="page">
              <header className="page-head frozen-seal">
                <span className="page-mark">
                  <Mark />
                </span>
                {seal}
                <span className="flex-1 phone:hidden" />
                {role === "guest" ? null : (
                  <Link className="chrome" href={`/groups/${groupId}`}>
                    {groupName}
                  </Link>
                )}
                {role === "guest" ? null : (
                  <Link className="chrome" href={`/pages/${snapshot.pageId}`}>
                    The live page
                  </Link>
                )}
                <span className="chrome phone:hidden">
                  <LightMenu />
                </span>
                <a className="chrome font-semibold" href={`/api/snapshots/${snapshot.id}/zip`} download>
                  Download the bundle, {sizeInWords(size)}
                </a>
              </header>
              {role === "guest" ? (
                <p className="-ml-3 border-b border-hairline px-3 py-2 text-margin text-second">
                  You read by a link from {groupName}
                  {guestUntil ? `, good until ${dayOf(guestUntil)}` : ""}. Nobody in the group sees who you are or that you are here.
                </p>
              ) : null}
              <SectionRail />
              <PageSheet
                title={<FrozenTitle snapshot={snapshot} />}
                beside={<Beside snapshot={snapshot} files={files} />}
                empty={<p className="text-second">This snapshot holds no blocks.</p>}
                foot={null}
              />
            </div>
            <footer className="frozen-foot">
              <b className="font-medium text-ink">Snapshot {snapshot.number}</b>
              <span>{dayOf(snapshot.frozenAt)}</span>
              <span className="font-mono">{shortHash(snapshot.hash)}</span>
            </footer>
          </div>
        </div>
      </div>
      {keys ? <ShortcutsDialog onClose={() => setKeys(false)} /> : null}
    </PageProvider>
  );
}
