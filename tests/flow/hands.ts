import type { Locator, Page } from "playwright-core";

/** How a person works a page: by pointer, or by nothing but the keyboard. */
export interface Hand {
  /** Presses a button or follows a link. */
  press(what: Locator): Promise<void>;
  /** Opens a menu and chooses from it. */
  choose(menu: Locator, item: RegExp): Promise<void>;
  /** Replaces what stands in a field; `done` leaves it, so that the text counts. */
  fill(field: Locator, text: string, done?: boolean): Promise<void>;
  /** Chooses from a list by what the choice says. */
  pick(list: Locator, label: string): Promise<void>;
  /** Goes to the end of an editor and types. */
  type(editor: Locator, text: string): Promise<void>;
  /** Ticks a box. */
  tick(box: Locator): Promise<void>;
}

/** By pointer, as most people do. */
export function pointer(page: Page): Hand {
  return {
    press: (what) => what.click(),
    async choose(menu, item) {
      await menu.click();
      await page.getByRole("menuitem", { name: item }).click();
    },
    async fill(field, text, done = false) {
      await field.fill(text);
      if (done) await field.press("Enter");
    },
    async pick(list, label) {
      await list.selectOption({ label });
    },
    async type(editor, text) {
      await editor.click();
      await page.keyboard.press("Control+End");
      await page.keyboard.type(text);
    },
    tick: (box) => box.check(),
  };
}

const MOST_TABS = 600;

/**
 * By keyboard alone: every place is reached with Tab from where the focus is, as somebody without a pointer reaches it. Fails
 * where a control cannot be reached so.
 */
export function keyboard(page: Page): Hand {
  async function reach(what: Locator): Promise<void> {
    await what.waitFor({ state: "visible" });
    const target = await what.elementHandle();
    if (target === null) throw new Error("the control went away while it was being reached");
    for (let tabs = 0; tabs < MOST_TABS; tabs++) {
      const isThere = await page.evaluate((element) => document.activeElement === element, target);
      if (isThere) return;
      // An editor keeps Tab to itself; Escape leaves it, as the list of shortcuts says.
      await page.keyboard.press("Tab");
    }
    throw new Error(`${String(what)} cannot be reached with Tab`);
  }
  return {
    async press(what) {
      await reach(what);
      await page.keyboard.press("Enter");
    },
    async choose(menu, item) {
      await reach(menu);
      await page.keyboard.press("Enter");
      const wanted = page.getByRole("menuitem", { name: item });
      await wanted.waitFor();
      for (let steps = 0; steps < 40; steps++) {
        const isThere = await wanted.evaluate((element) => document.activeElement === element);
        if (isThere) return page.keyboard.press("Enter");
        await page.keyboard.press("ArrowDown");
      }
      throw new Error(`${String(item)} cannot be reached with the arrows`);
    },
    async fill(field, text, done = false) {
      await reach(field);
      await page.keyboard.press("Control+A");
      if (text === "") await page.keyboard.press("Delete");
      else await page.keyboard.type(text);
      if (done) await page.keyboard.press("Enter");
    },
    async pick(list, label) {
      await reach(list);
      const shown = () => list.evaluate((element) => (element as HTMLSelectElement).selectedOptions[0]?.label ?? "");
      await page.keyboard.press("Home");
      for (let steps = 0; steps < 60; steps++) {
        if ((await shown()) === label) return;
        await page.keyboard.press("ArrowDown");
      }
      throw new Error(`"${label}" cannot be chosen with the arrows`);
    },
    async type(editor, text) {
      await reach(editor);
      await page.keyboard.press("Control+End");
      await page.keyboard.type(text);
    },
    async tick(box) {
      await reach(box);
      if (!(await box.isChecked())) await page.keyboard.press("Space");
    },
  };
}
