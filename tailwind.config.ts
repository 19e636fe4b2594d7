import type { Config } from "tailwindcss";

/**
 * The product's tokens under the names that class attributes use. The values are CSS variables, set in app/globals.css for
 * the two lights.
 */
const color = (name: string): string => `var(--${name})`;

export default {
  content: ["./app/**/*.{ts,tsx}"],
  theme: {
    colors: {
      transparent: "transparent",
      current: "currentColor",
      paper: color("paper"),
      surface: color("surface"),
      ink: color("ink"),
      second: color("second"),
      hairline: color("hairline"),
      axis: color("axis"),
      pattern: color("pattern"),
      straw: color("straw"),
      vermilion: color("vermilion"),
      magenta: color("magenta"),
      indigo: color("indigo"),
      blue: color("blue"),
      green: color("green"),
      wash: color("wash"),
    },
    fontFamily: {
      serif: ['"STIX Two Text"', "STIXGeneral", "Times New Roman", "serif"],
      sans: ['"IBM Plex Sans"', "Helvetica Neue", "Arial", "sans-serif"],
      mono: ['"IBM Plex Mono"', "Menlo", "Consolas", "monospace"],
    },
    borderRadius: { none: "0", full: "9999px" },
    boxShadow: { none: "none" },
    fontSize: {
      tick: ["11px", "16px"],
      margin: ["12px", "16px"],
      cell: ["12.5px", "24px"],
      ui: ["13px", "20px"],
      block: ["15px", "20px"],
      result: ["15px", "24px"],
      note: ["17px", "28px"],
      "note-narrow": ["16px", "24px"],
      lead: ["19px", "28px"],
      equation: ["21px", "32px"],
      trace: ["24px", "32px"],
      solved: ["28px", "40px"],
      title: ["44px", "48px"],
      "title-phone": ["30px", "34px"],
    },
    screens: { phone: { max: "719px" }, narrow: { max: "1199px" }, wide: "1200px" },
  },
} satisfies Config;
