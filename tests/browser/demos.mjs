// The demos' packages in a real browser, started once for all tests.

import { readFileSync, readdirSync } from "node:fs";
import { createRequire } from "node:module";
import { dirname, resolve } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";

const root = resolve(dirname(fileURLToPath(import.meta.url)), "../..");
const require = createRequire(resolve(root, "target/tools/package.json"));
const { chromium } = require("playwright-core");

/** The rules of WCAG 2.2 A and AA and the checker's own best practice, as a script. */
export const axe = readFileSync(require.resolve("axe-core/axe.min.js"), "utf8");

export const WIDE = { width: 1400, height: 900 };

const projects = process.env.SPANFOLIO_DEMOS ?? resolve(root, "demo-projects");
export const demos = readdirSync(projects).sort();

/** The Record beside a demo's page. */
export function record(demo) {
  return JSON.parse(readFileSync(resolve(projects, demo, "package/record.json"), "utf8"));
}

export const browser = await chromium.launch({
  executablePath: process.env.SPANFOLIO_BROWSER ?? "/usr/bin/chromium",
  args: process.getuid?.() === 0 ? ["--no-sandbox"] : [],
});

/** Opens a page; what goes wrong in it, and what it asks for besides itself, gathers in `faults`. */
async function open(demo, options) {
  const context = await browser.newContext({ viewport: { width: 1400, height: 900 }, ...options });
  const page = await context.newPage();
  const faults = [];
  page.on("console", (message) => ["error", "warning"].includes(message.type()) && faults.push(message.text()));
  page.on("pageerror", (error) => faults.push(String(error)));
  const address = pathToFileURL(resolve(projects, demo, "package/package.html")).href;
  page.on("request", (request) => {
    const url = request.url();
    if (url !== address && !url.startsWith("data:")) faults.push(`asks for ${url}`);
  });
  await page.goto(address);
  await page.evaluate(() => document.fonts.ready);
  return { page, faults };
}

const opened = new Map();

/** The demo's page with these options, opened once: tests leave it as they found it. */
export function demoPage(demo, options = {}) {
  const key = JSON.stringify([demo, options]);
  if (!opened.has(key)) opened.set(key, open(demo, options));
  return opened.get(key);
}
