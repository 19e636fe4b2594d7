"use client";

import { ContextMenu as RadixContext, DropdownMenu as RadixMenu } from "radix-ui";
import { useRef, type ReactNode } from "react";
import { classNames } from "./classNames";
import { IconCheck } from "./icons";

/** One line of a menu. `line` draws a hairline between groups. */
export type MenuItem =
  | {
      readonly label: ReactNode;
      readonly onChoose: () => void;
      /** Shown at the right: "Alt ↑". */
      readonly keys?: string | undefined;
      readonly danger?: boolean | undefined;
      readonly disabled?: boolean | undefined;
      /** A tick before it: the present choice of several. */
      readonly checked?: boolean | undefined;
      /** It opens a field or a sheet that takes the focus, which therefore does not go back to the menu's button. */
      readonly opens?: boolean | undefined;
    }
  | { readonly line: true }
  | { readonly heading: string };

export interface MenuProps {
  readonly items: readonly MenuItem[];
  /** The button that opens it. */
  readonly children: ReactNode;
  readonly align?: "start" | "end";
  readonly onOpenChange?: (open: boolean) => void;
}

const contentLook = "z-50 min-w-44 max-w-80 border border-ink bg-surface py-1 text-ui text-ink";
const itemLook =
  "flex min-h-7 cursor-default items-center gap-2 px-3 outline-none data-[disabled]:text-second data-[highlighted]:bg-wash data-[highlighted]:text-ink";

type Kit = { Item: typeof RadixMenu.Item; Separator: typeof RadixMenu.Separator; Label: typeof RadixMenu.Label };

function content(items: readonly MenuItem[], kit: Kit, onOpens: () => void) {
  const ticked = items.some((item) => "onChoose" in item && item.checked !== undefined);
  return items.map((item, i) => {
    if ("line" in item) return <kit.Separator key={i} className="my-1 border-t border-hairline" />;
    if ("heading" in item)
      return (
        <kit.Label key={i} className="px-3 pt-1 text-tick text-second">
          {item.heading}
        </kit.Label>
      );
    return (
      <kit.Item
        key={i}
        disabled={item.disabled ?? false}
        onSelect={() => {
          if (item.opens) onOpens();
          item.onChoose();
        }}
        className={classNames(itemLook, item.danger && "text-vermilion")}
      >
        {ticked ? <span className="w-4">{item.checked ? <IconCheck /> : null}</span> : null}
        <span className="flex-1">{item.label}</span>
        {item.keys ? <kbd className="font-mono text-tick text-second">{item.keys}</kbd> : null}
      </kit.Item>
    );
  });
}

/** Lets a chosen item keep the focus it took. */
function useKeptFocus() {
  const opened = useRef(false);
  return {
    onOpens: () => {
      opened.current = true;
    },
    onCloseAutoFocus: (event: Event) => {
      if (opened.current) event.preventDefault();
      opened.current = false;
    },
  };
}

/** A menu under a button; opens with Enter, Space or ↓, moves with the arrows, closes with Escape. */
export function Menu({ items, children, align = "end", onOpenChange }: MenuProps) {
  const keeping = useKeptFocus();
  return (
    <RadixMenu.Root modal={false} {...(onOpenChange ? { onOpenChange } : {})}>
      <RadixMenu.Trigger asChild>{children}</RadixMenu.Trigger>
      <RadixMenu.Portal>
        <RadixMenu.Content align={align} sideOffset={4} collisionPadding={8} className={contentLook} onCloseAutoFocus={keeping.onCloseAutoFocus}>
          {content(items, RadixMenu, keeping.onOpens)}
        </RadixMenu.Content>
      </RadixMenu.Portal>
    </RadixMenu.Root>
  );
}

/** The same menu at the pointer, by right click, long press or the menu key. */
export function PlaceMenu({ items, children, onOpenChange }: Omit<MenuProps, "align">) {
  const keeping = useKeptFocus();
  return (
    <RadixContext.Root modal={false} {...(onOpenChange ? { onOpenChange } : {})}>
      <RadixContext.Trigger asChild>{children}</RadixContext.Trigger>
      <RadixContext.Portal>
        <RadixContext.Content collisionPadding={8} className={contentLook} onCloseAutoFocus={keeping.onCloseAutoFocus}>
          {content(items, RadixContext, keeping.onOpens)}
        </RadixContext.Content>
      </RadixContext.Portal>
    </RadixContext.Root>
  );
}
