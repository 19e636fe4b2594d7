"use client";

import { Button } from "@/app/_ui/Button";
import { IconLight } from "@/app/_ui/icons";
import { Menu } from "@/app/_ui/Menu";
import { setLight, useLightSetting, type LightSetting } from "@/app/_ui/useLight";

const settings: readonly { readonly setting: LightSetting; readonly label: string }[] = [
  { setting: "plane", label: "Plane light (light)" },
  { setting: "polars", label: "Crossed polars (dark)" },
  { setting: "system", label: "As the system has it" },
];

/** The choice between the two lights. */
export function LightSwitch() {
  const now = useLightSetting();
  return (
    <Menu items={settings.map(({ setting, label }) => ({ label, checked: setting === now, onChoose: () => setLight(setting) }))}>
      <Button look="act" className="font-normal">
        <IconLight />
        Light
      </Button>
    </Menu>
  );
}
