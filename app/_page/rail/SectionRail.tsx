"use client";

import { useMemo, useState, type KeyboardEvent } from "react";
import { useSize } from "@/app/_ui/useSize";
import { goToBlock } from "../goTo";
import { usePage } from "../pageContext";
import { kindWords } from "../kindWords";
import { layerPath, layOutRail, railPlace, type RailBlock } from "./railLayout";
import { patternOf, RailPatterns } from "./RailPatterns";
import { RailTies } from "./RailTies";
import { useFramePlaces, useScreenPart } from "./useRailBlocks";

/** Narrower than this, the rail is the phone's strip. */
const STRIP_BELOW = 60;
const HEAD = 48;

function initials(name: string): string {
  return name
    .split(/\s+/)
    .filter(Boolean)
    .slice(0, 2)
    .map((part) => part.slice(0, 1).toUpperCase())
    .join("");
}

/**
 * The page as a measured section: outline, minimap, dependencies and presence in one. One tab stop; arrows move from layer to
 * layer, Enter goes there.
 */
export function SectionRail() {
  const blocks = usePage((s) => s.blocks);
  const results = usePage((s) => s.results);
  const present = usePage((s) => s.present);
  const frozen = usePage((s) => s.mode === "frozen");
  const [box, size] = useSize<HTMLElement>();
  const places = useFramePlaces(blocks.map((b) => b.key).join(" "));
  const screen = useScreenPart(HEAD);
  const [hovered, setHovered] = useState<string | null>(null);
  const [focused, setFocused] = useState<string | null>(null);

  const strip = size.width < STRIP_BELOW;
  const x = strip ? 5 : Math.min(60, size.width - 56);
  const w = strip ? 14 : 44;
  const top = strip ? 8 : 16;
  const layers = useMemo(() => {
    const byKey = new Map(blocks.map((b) => [b.key, b.block]));
    const measured = places.flatMap((place): RailBlock[] => {
      const block = byKey.get(place.key);
      if (block === undefined) return [];
      const problem = results?.blocks.get(block.id)?.problems.some((p) => p.severity === "error") ?? false;
      return [{ ...place, handle: block.id, kind: block.kind, name: block.name ?? "", problem }];
    });
    return layOutRail(measured, { x, y: top, width: w, height: Math.max(0, size.height - 2 * top) });
  }, [blocks, results, places, size.height, x, w, top]);

  const shown = hovered ?? focused;
  const tabStop = focused !== null && layers.some((l) => l.key === focused) ? focused : (layers[0]?.key ?? null);
  const onKeyDown = (event: KeyboardEvent<SVGElement>) => {
    const at = layers.findIndex((l) => l.key === focused);
    const step = { ArrowDown: 1, ArrowRight: 1, ArrowUp: -1, ArrowLeft: -1 }[event.key];
    const next = event.key === "Home" ? layers[0] : event.key === "End" ? layers[layers.length - 1] : step === undefined ? undefined : layers[at + step];
    if (next !== undefined) {
      event.preventDefault();
      event.currentTarget.querySelector<SVGAElement>(`[data-layer="${CSS.escape(next.key)}"]`)?.focus();
    }
  };
  const amplitude = strip ? 1.6 : 4.5;
  const from = railPlace(layers, screen[0]);
  const to = railPlace(layers, screen[1]);
  const shownHandle = layers.find((l) => l.key === shown)?.handle;
  return (
    <nav ref={box} aria-label="Section rail: the page's blocks" className="rail chrome">
      <svg width={size.width} height={size.height} onKeyDown={onKeyDown} onMouseLeave={() => setHovered(null)}>
        <RailPatterns />
        {layers.map((layer) => {
          const { outline, edge } = layerPath(layer, amplitude);
          const pattern = patternOf(layer.kind);
          const people = present.filter((p) => p.block === layer.key);
          const title = layer.name === "" ? kindWords[layer.kind].one : layer.name;
          const here = people.length > 0 ? `, here: ${people.map((p) => (p.isMe ? "you" : p.name)).join(", ")}` : "";
          return (
            <g key={layer.key}>
              <a
                href={`#${layer.handle}`}
                data-layer={layer.key}
                tabIndex={layer.key === tabStop ? 0 : -1}
                aria-label={`${title}, ${kindWords[layer.kind].one} ${layer.handle}${layer.problem ? ", has a problem" : ""}${here}`}
                onClick={(event) => {
                  event.preventDefault();
                  goToBlock(layer.key);
                }}
                onFocus={() => setFocused(layer.key)}
                onBlur={() => setFocused(null)}
                onMouseEnter={() => setHovered(layer.key)}
                className="rail-layer"
              >
                <path d={outline} fill="var(--paper)" />
                {pattern ? <path d={outline} fill={pattern} /> : null}
                <path
                  d={edge}
                  fill="none"
                  stroke={layer.problem && layer.last ? "var(--vermilion)" : "var(--ink)"}
                  strokeWidth={layer.problem && layer.last ? 1.6 : 1}
                />
                <path d={`M${layer.x + layer.w} ${layer.y}H${layer.x}V${layer.y + layer.h}`} fill="none" stroke="var(--ink)" />
                {layer.problem && !layer.last ? <path d={edge} fill="none" stroke="var(--vermilion)" strokeWidth={1.6} /> : null}
                {frozen
                  ? null
                  : people.slice(0, 4).map((person, i) => (
                      <g key={person.clientId} fill={person.color}>
                        <rect x={x - (strip ? 4 : 8) - i * 5} y={layer.y + 4} width={3} height={Math.max(6, Math.min(14, layer.h - 8))} />
                        {!strip && i === 0 && !person.isMe && layer.h >= 44 ? (
                          <text
                            x={x - 14}
                            y={layer.y + 30 + (layer.last ? 0 : 12)}
                            textAnchor="end"
                            className="rail-initials"
                            aria-hidden="true"
                            style={{ fill: person.color }}
                          >
                            {initials(person.name)}
                          </text>
                        ) : null}
                        <title>{person.isMe ? "you" : person.name}</title>
                      </g>
                    ))}
                <path d={outline} className="rail-focus" fill="none" />
              </a>
              {/* Outside the link: what is read out is the whole name, and a shortened handle is no word of it. */}
              {!strip && layer.place < 2 ? (
                <text
                  x={x - 14}
                  y={layer.y + 13 + layer.place * 12}
                  textAnchor="end"
                  className="rail-handle cursor-pointer"
                  aria-hidden="true"
                  onClick={() => goToBlock(layer.key)}
                >
                  {layer.handle.length > 5 ? `${layer.handle.slice(0, 4)}…` : layer.handle}
                </text>
              ) : null}
            </g>
          );
        })}
        {layers.length > 0 ? (
          <>
            <path d={`M${x} ${size.height - top}H${x + w}`} stroke="var(--ink)" />
            <path
              d={strip ? `M4 ${from.toFixed(1)}H2V${to.toFixed(1)}h2` : `M10.5 ${from.toFixed(1)}H6.5V${to.toFixed(1)}h4`}
              fill="none"
              stroke="var(--ink)"
              pointerEvents="none"
            />
          </>
        ) : null}
        {shownHandle !== undefined && !strip && results !== null ? (
          <RailTies layers={layers} handle={shownHandle} readsFrom={results.readsFrom} right={x + w} />
        ) : null}
      </svg>
    </nav>
  );
}
