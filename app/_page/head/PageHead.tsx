"use client";

import Link from "next/link";
import { Button } from "@/app/_ui/Button";
import { Mark } from "@/app/_ui/icons";
import { Menu, type MenuItem } from "@/app/_ui/Menu";
import { usePage, usePageStore } from "../pageContext";
import type { LivePageProps } from "../props";
import { LightMenu } from "./LightMenu";
import { People } from "./People";
import { SaveWords } from "./SaveWords";

export type PageDialog = "freeze" | "links" | "bin" | "bodies" | "shortcuts";

export interface PageHeadProps {
  readonly page: LivePageProps["page"];
  readonly role: LivePageProps["role"];
  readonly open: (dialog: PageDialog) => void;
  readonly onUncertainty: () => void;
  readonly onProjector: () => void;
}

/** The line over a live page: group, Saved, people, light, reading link, freeze. */
export function PageHead({ page, role, open, onUncertainty, onProjector }: PageHeadProps) {
  const store = usePageStore();
  const edits = usePage((s) => s.edits);
  const settings = usePage((s) => s.settings);
  const binned = usePage((s) => s.bin.length);
  const isLead = role === "lead";
  const items: MenuItem[] = [
    ...(edits === null
      ? []
      : ([
          { label: "Undo", keys: "Ctrl Z", onChoose: () => store.actions.undo() },
          { label: "Redo", keys: "Ctrl Shift Z", onChoose: () => store.actions.redo() },
          { line: true },
          { label: "Bodies of this page", onChoose: () => open("bodies") },
          { label: `Bin, ${binned === 1 ? "1 block" : `${binned} blocks`}`, onChoose: () => open("bin") },
          { line: true },
        ] satisfies MenuItem[])),
    ...(isLead
      ? ([{ label: "Freeze", onChoose: () => open("freeze") }, { label: "Reading links", onChoose: () => open("links") }, { line: true }] satisfies MenuItem[])
      : []),
    { heading: "Uncertainties as" },
    { label: "1.086(12)", checked: settings.uncertainty === "concise", onChoose: onUncertainty },
    { label: "1.086 ± 0.012", checked: settings.uncertainty === "plus-minus", onChoose: onUncertainty },
    { line: true },
    { label: "Projector", keys: "P", checked: settings.projector, onChoose: onProjector },
    { label: "Print", keys: "Ctrl P", onChoose: () => window.print() },
    { label: "Keyboard shortcuts", keys: "?", onChoose: () => open("shortcuts") },
  ];
  return (
    <header className="page-head">
      <Link href="/" className="page-mark text-ink" aria-label="Cotectic: your groups">
        <Mark />
      </Link>
      {role === "guest" ? (
        <span className="font-medium">{page.groupName}</span>
      ) : (
        <Link href={`/groups/${page.groupId}`} className="font-medium !text-ink">
          {page.groupName}
        </Link>
      )}
      <SaveWords />
      <span className="flex-1 phone:h-0 phone:basis-full" />
      <People />
      <nav aria-label="This page" className="flex items-baseline gap-6 phone:ml-auto phone:gap-4">
        <LightMenu />
        {isLead ? (
          <Button className="phone:hidden" onClick={() => open("links")}>
            Reading link
          </Button>
        ) : null}
        <Menu items={items}>
          <Button>Menu</Button>
        </Menu>
        {isLead ? (
          <Button look="main" onClick={() => open("freeze")}>
            Freeze
          </Button>
        ) : null}
      </nav>
    </header>
  );
}
