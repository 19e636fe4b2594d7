import type { Browser } from "playwright-core";
import { afterAll, beforeAll, expect, inject, test } from "vitest";
import { launchBrowser } from "../support/browser";
import { PASSWORD } from "./people";

let browser: Browser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(async () => {
  await browser.close();
});

test("forms work before their script has loaded: sign up, and make a page", async () => {
  const page = await (await browser.newContext({ javaScriptEnabled: false, baseURL: inject("url") })).newPage();
  await page.goto("/sign-up");
  await page.getByLabel("Your name").fill("Piet Oyelaran");
  await page.getByLabel("E-mail").fill(`piet.${Date.now().toString(36)}@example.org`);
  await page.getByLabel("Password").fill(PASSWORD);
  await page.getByLabel("Name of the group").fill("Patient Group");
  await page.getByRole("button", { name: "Sign up" }).click();
  await page.getByRole("heading", { level: 1, name: "Patient Group", exact: true }).waitFor();
  await page.getByRole("button", { name: "New page" }).click();
  await page.waitForURL(/\/pages\//u);
  expect(await page.locator("body").innerText()).not.toMatch(/error/iu);
});
