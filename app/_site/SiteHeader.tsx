import Link from "next/link";
import type { ReactNode } from "react";
import { Mark } from "@/app/_ui/icons";
import { LightSwitch } from "./LightSwitch";

export interface SiteHeaderProps {
  /** Where the mark leads; the start page where left out. */
  readonly home?: string;
  /** What stands beside the mark; the product's name where left out. */
  readonly title?: ReactNode;
  /** Links and actions at the right. */
  readonly children?: ReactNode;
}

/** The head of every screen but a live or frozen page: mark, name, what one can do here, and the light. */
export function SiteHeader({ home = "/", title = "Cotectic", children }: SiteHeaderProps) {
  return (
    <header className="chrome sticky top-0 z-10 flex min-h-12 flex-wrap items-center gap-x-6 gap-y-1 border-b border-ink bg-paper px-12 py-2 narrow:px-4">
      <Link href={home} className="flex items-center gap-4 font-serif text-[18px] leading-6 font-medium text-ink no-underline">
        <Mark />
        <span>{title}</span>
      </Link>
      <span className="flex-1" />
      <nav aria-label="Here" className="flex flex-wrap items-center gap-x-6 gap-y-1">
        {children}
        <LightSwitch />
      </nav>
    </header>
  );
}
