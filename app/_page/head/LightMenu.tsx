"use client";

import { Button } from "@/app/_ui/Button";
import { IconLight } from "@/app/_ui/icons";
import { Menu } from "@/app/_ui/Menu";
import { setLight, useLightSetting, type LightSetting } from "@/app/_ui/useLight";

const words: readonly (readonly [LightSetting, string])[] = [
  ["plane", "Plane light"],
  ["polars", "Crossed polars"],
  ["system", "Follow the system"],
];

/** The two lights of the page, after the two lights of a petrographic microscope. */
export function LightMenu() {
  const setting = useLightSetting();
  return (
    <Menu items={words.map(([value, label]) => ({ label, checked: value === setting, onChoose: () => setLight(value) }))}>
      <Button>
        <IconLight /> Light
      </Button>
    </Menu>
  );
}
