"use client";

import { Tooltip as RadixTooltip } from "radix-ui";
import type { ReactNode } from "react";

export interface TooltipProps {
  readonly says: ReactNode;
  /** One focusable element. */
  readonly children: ReactNode;
  readonly side?: "top" | "right" | "bottom" | "left";
}

/** A few words beside something, on hover and on focus. Never the only place where they stand. */
export function Tooltip({ says, children, side = "top" }: TooltipProps) {
  return (
    <RadixTooltip.Provider delayDuration={300}>
      <RadixTooltip.Root>
        <RadixTooltip.Trigger asChild>{children}</RadixTooltip.Trigger>
        <RadixTooltip.Portal>
          <RadixTooltip.Content
            side={side}
            sideOffset={4}
            collisionPadding={8}
            className="z-50 max-w-80 border border-ink bg-surface px-2 py-1 text-margin text-ink"
          >
            {says}
          </RadixTooltip.Content>
        </RadixTooltip.Portal>
      </RadixTooltip.Root>
    </RadixTooltip.Provider>
  );
}
