"use client";

import { useRouter } from "next/navigation";
import { useCallback, useEffect, useMemo, useState } from "react";
import { BinDialog } from "./dialogs/BinDialog";
import { BodiesDialog } from "./dialogs/BodiesDialog";
import { FreezeDialog } from "./dialogs/FreezeDialog";
import { LinksDialog } from "./dialogs/LinksDialog";
import { ShortcutsDialog } from "./dialogs/ShortcutsDialog";
import { PageHead, type PageDialog } from "./head/PageHead";
import { PageTitle } from "./head/PageTitle";
import { connectLive } from "./connectLive";
import { AddBlock, LiveEmpty } from "./LiveEmpty";
import { LiveFoot } from "./LiveFoot";
import { createLiveSession } from "./liveSession";
import { PageProvider } from "./pageContext";
import { PageSheet } from "./PageSheet";
import type { LastSnapshot, LivePageProps } from "./props";
import { SectionRail } from "./rail/SectionRail";
import { stepFrom } from "./stepFrom";
import { dayOf } from "./times";
import { switchProjector, switchUncertainty, useStoredSettings } from "./useSettings";
import { useShortcuts } from "./useShortcuts";
import "./page.css";

/** A live page: the same document for everyone on it, calculated in each browser. */
export function LivePage(props: LivePageProps) {
  const { page, role, guestUntil } = props;
  const [session] = useState(() => createLiveSession(props, connectLive));
  const { store } = session;
  const [dialog, setDialog] = useState<PageDialog | null>(null);
  const [lastSnapshot, setLastSnapshot] = useState<LastSnapshot | null>(props.lastSnapshot ?? null);
  const router = useRouter();
  useEffect(() => session.start(), [session]);
  useStoredSettings(store);

  const step = useCallback(
    (by: 1 | -1) =>
      stepFrom(
        store.get().blocks.map((b) => b.key),
        by,
      ),
    [store],
  );
  const keys = useMemo(
    () => ({
      undo: store.actions.undo,
      redo: store.actions.redo,
      projector: () => switchProjector(store),
      shortcuts: () => setDialog("shortcuts"),
      step,
      letGo() {
        if (store.get().traced !== null) store.actions.trace(null);
        else store.actions.pick([]);
      },
    }),
    [store, step],
  );
  useShortcuts(keys);
  const close = () => setDialog(null);
  return (
    <PageProvider store={store}>
      <div className="page">
        <PageHead page={page} role={role} open={setDialog} onUncertainty={() => switchUncertainty(store)} onProjector={() => switchProjector(store)} />
        {role === "guest" ? (
          <p className="-ml-3 border-b border-hairline px-3 py-2 text-margin text-second">
            You read this live page by a link from {page.groupName}
            {guestUntil ? `, good until ${dayOf(guestUntil)}` : ""}. It changes as the group works on it. Nobody in the group sees who you are or that you are
            here.
          </p>
        ) : null}
        <SectionRail />
        <PageSheet
          title={<PageTitle lastSnapshot={lastSnapshot} onBodies={() => setDialog("bodies")} />}
          empty={<LiveEmpty />}
          foot={
            <>
              <AddBlock />
              <LiveFoot open={setDialog} />
            </>
          }
        />
      </div>
      {dialog === "freeze" ? (
        <FreezeDialog
          pageId={page.id}
          stateVector={session.stateVector}
          onClose={close}
          onFrozen={(frozen) => {
            setLastSnapshot({ id: frozen.snapshotId, number: frozen.number, hash: frozen.hash, frozenAt: new Date().toISOString() });
            router.refresh();
          }}
          onReadingLink={() => setDialog("links")}
        />
      ) : null}
      {dialog === "links" ? <LinksDialog pageId={page.id} snapshot={lastSnapshot} onClose={close} /> : null}
      {dialog === "bin" ? <BinDialog onClose={close} /> : null}
      {dialog === "bodies" ? <BodiesDialog onClose={close} /> : null}
      {dialog === "shortcuts" ? <ShortcutsDialog onClose={close} /> : null}
    </PageProvider>
  );
}
