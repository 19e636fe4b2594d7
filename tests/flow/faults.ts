import axe from "axe-core";
import type { Page } from "playwright-core";

/** Serious and critical faults that axe finds, each as a short line. */
export async function faults(page: Page): Promise<string[]> {
  await page.evaluate(axe.source);
  const found = await page.evaluate(async () => {
    const { violations } = await (window as unknown as { axe: typeof axe }).axe.run(document, { resultTypes: ["violations"] });
    return violations.map(({ id, impact, nodes }) => ({ id, impact, at: nodes.slice(0, 3).map((node) => node.target.join(" ")) }));
  });
  return found.filter(({ impact }) => impact === "serious" || impact === "critical").map(({ id, at }) => `${id}: ${at.join(" | ")}`);
}
