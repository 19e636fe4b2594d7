import { connectPage, type Save } from "@/realtime/client";
import type { SaveState } from "./contract";
import type { Connect } from "./liveSession";
import { clockTime } from "./times";

/**
 * What the head of the page says. "Saved" carries the time of the last edit that reached the disk; a page on which one has
 * edited nothing yet is saved without one.
 */
export function saveInWords(save: Save, savedAt: Date | null): SaveState {
  return save.kind === "saved" && savedAt !== null ? { ...save, text: `Saved ${clockTime(savedAt)}` } : save;
}

/** A port alone is one of the host that the browser has the page from. */
function onOwnHost(url: string): string {
  return url.startsWith(":") ? `${location.protocol === "https:" ? "wss" : "ws"}://${location.hostname}${url}` : url;
}

/** Connects a live page to the realtime server. */
export const connectLive: Connect = ({ page, me, role, realtimeUrl, version }, events) => {
  let waiting = 0;
  let savedAt: Date | null = null;
  return connectPage(
    {
      url: onOwnHost(realtimeUrl),
      pageId: page.id,
      epoch: page.epoch,
      user: me,
      mayEdit: me !== null && (role === "lead" || role === "analyst"),
      version: Number(version),
    },
    {
      onSave(save) {
        if (save.kind === "saved" && waiting > 0) savedAt = new Date();
        waiting = save.waiting;
        events.onSave(saveInWords(save, savedAt));
      },
      onReady: events.onReady,
      onEnded: (sentence) => events.onEnded(sentence),
      onDrafts: events.onDrafts,
    },
  );
};
