"use client";

import { Dialog } from "@/app/_ui/Dialog";
import { shortcutList } from "../useShortcuts";

export function ShortcutsDialog({ onClose }: { readonly onClose: () => void }) {
  return (
    <Dialog open onClose={onClose} title="Keyboard shortcuts">
      <dl className="grid grid-cols-[auto_1fr] gap-x-6">
        {shortcutList.map(([keys, does]) => (
          <div key={keys} className="col-span-2 grid grid-cols-subgrid border-b border-hairline py-1.5">
            <dt className="font-mono text-[12px]">{keys}</dt>
            <dd>{does}</dd>
          </div>
        ))}
      </dl>
    </Dialog>
  );
}
