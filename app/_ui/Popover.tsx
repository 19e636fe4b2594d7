"use client";

import { Popover as RadixPopover } from "radix-ui";
import type { ReactNode } from "react";

export interface PopoverProps {
  readonly open?: boolean;
  readonly onOpenChange?: (open: boolean) => void;
  /** The control that opens it. */
  readonly trigger?: ReactNode;
  /** Where it stands, when nothing in it is a trigger. */
  readonly anchor?: ReactNode;
  readonly label: string;
  readonly align?: "start" | "center" | "end";
  readonly children: ReactNode;
}

/** A small sheet beside what it is about; Escape and a click elsewhere close it. */
export function Popover({ open, onOpenChange, trigger, anchor, label, align = "start", children }: PopoverProps) {
  return (
    <RadixPopover.Root {...(open === undefined ? {} : { open })} {...(onOpenChange ? { onOpenChange } : {})}>
      {trigger ? <RadixPopover.Trigger asChild>{trigger}</RadixPopover.Trigger> : null}
      {anchor ? <RadixPopover.Anchor asChild>{anchor}</RadixPopover.Anchor> : null}
      <RadixPopover.Portal>
        <RadixPopover.Content
          aria-label={label}
          align={align}
          sideOffset={6}
          collisionPadding={12}
          className="z-50 w-80 max-w-[calc(100vw-24px)] border border-ink bg-surface p-4 text-ui text-ink focus:outline-none"
        >
          {children}
        </RadixPopover.Content>
      </RadixPopover.Portal>
    </RadixPopover.Root>
  );
}
