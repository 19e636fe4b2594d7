"use client";

import { Dialog as RadixDialog } from "radix-ui";
import type { ReactNode } from "react";
import { classNames } from "./classNames";
import { IconButton } from "./IconButton";
import { IconClose } from "./icons";
import "./nonce";

export interface DialogProps {
  readonly open: boolean;
  readonly onClose: () => void;
  readonly title: ReactNode;
  /** One sentence under the title that says what this is for. */
  readonly says?: ReactNode;
  /** `wide` for tables, `narrow` for a question. */
  readonly size?: "narrow" | "wide" | "full";
  readonly children: ReactNode;
  /** Actions at the foot, the main one last. */
  readonly actions?: ReactNode;
}

const sizes = { narrow: "max-w-[520px]", wide: "max-w-[936px]", full: "max-w-[1264px]" } as const;

/** A sheet over the page: keyboard stays inside, Escape closes, focus returns to where it was. */
export function Dialog({ open, onClose, title, says, size = "narrow", children, actions }: DialogProps) {
  return (
    <RadixDialog.Root open={open} onOpenChange={(next) => (next ? undefined : onClose())}>
      <RadixDialog.Portal>
        <RadixDialog.Overlay className="fixed inset-0 z-40 bg-[color-mix(in_srgb,var(--paper)_78%,transparent)]" />
        <RadixDialog.Content
          {...(says ? {} : { "aria-describedby": undefined })}
          className={classNames(
            "fixed top-[6vh] left-1/2 z-40 flex max-h-[88vh] w-[calc(100vw-32px)] -translate-x-1/2 flex-col border border-ink bg-paper text-ui text-ink focus:outline-none",
            sizes[size],
          )}
        >
          <header className="flex items-start gap-4 border-b border-ink px-6 pt-4 pb-3">
            <div className="min-w-0 flex-1">
              <RadixDialog.Title className="font-serif text-[22px] leading-7 font-medium">{title}</RadixDialog.Title>
              {says ? <RadixDialog.Description className="mt-1 text-second">{says}</RadixDialog.Description> : null}
            </div>
            <RadixDialog.Close asChild>
              <IconButton look="quiet" label="Close">
                <IconClose />
              </IconButton>
            </RadixDialog.Close>
          </header>
          <div className="min-h-0 flex-1 overflow-y-auto px-6 py-4">{children}</div>
          {actions ? <footer className="flex flex-wrap items-center justify-end gap-6 border-t border-hairline px-6 py-3">{actions}</footer> : null}
        </RadixDialog.Content>
      </RadixDialog.Portal>
    </RadixDialog.Root>
  );
}
