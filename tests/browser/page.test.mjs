// What a reader meets in package.html: run by tests/run with `node --test`.

import assert from "node:assert/strict";
import { after, test } from "node:test";

import { WIDE, axe, browser, demoPage, demos, record } from "./demos.mjs";

after(() => browser.close());

/** Runs a test on each demo's page, opened with these options. */
function onEach(name, options, body) {
  for (const demo of demos) {
    test(`${demo}: ${name}`, async () => {
      const { page, faults } = await demoPage(demo, options);
      await body(page, { demo, faults });
    });
  }
}



onEach("loads without errors and asks for nothing else", {}, async (page, { faults }) => {
  assert.deepEqual(faults, []);
});

onEach("its own fonts are used", {}, async (page) => {
  const loaded = await page.evaluate(() => {
    return [...document.fonts].filter((font) => font.status === "loaded").map((font) => font.family.replaceAll('"', ""));
  });
  assert.ok(loaded.includes("Spanfolio Text"), String(loaded));
  assert.ok(loaded.includes("Spanfolio Math"), String(loaded));
});

onEach("every line of the contents leads to its heading", {}, async (page) => {
  const wrong = await page.evaluate(() =>
    [...document.querySelectorAll(".contents a")]
      .filter((link) => !document.getElementById(link.hash.slice(1))?.textContent.startsWith(link.textContent))
      .map((link) => link.hash),
  );
  assert.deepEqual(wrong, []);
  const last = page.locator(".contents a").last();
  await last.click();
  await page.waitForFunction((id) => document.getElementById(id).getBoundingClientRect().top < innerHeight, (await last.getAttribute("href")).slice(1));
});

onEach("a diagram reads what the Record says governs, at its position", {}, async (page, { demo }) => {
  const { members } = record(demo).results;
  const { figures, wrong, read } = await page.evaluate((members) => {
    const data = JSON.parse(document.getElementById("page.record").textContent);
    const wrong = [];
    let read = 0;
    for (const [id, { member, purpose, rows }] of Object.entries(data.figures)) {
      const figure = document.getElementById(`figure-${id}`);
      const field = figure.querySelector("input[type=number]");
      for (const { effect } of rows) {
        const governing = members[member].governing[purpose][effect];
        if (!governing) continue;
        for (const [column, end] of [[1, governing.max], [3, governing.min]]) {
          field.value = end.x / data.units.x.factor;
          field.dispatchEvent(new Event("input"));
          const cell = figure.querySelector(`tr[data-effect="${effect}"]`).cells[column].textContent;
          const values = cell.split(" | ").map((text) => Number(text.replace("\u2212", "-").replaceAll("\u2009", "").replace(/×10(.*)/, (_, power) =>
            "e" + power.replace("⁻", "-").replace(/[⁰¹²³⁴⁵⁶⁷⁸⁹]/g, (c) => "⁰¹²³⁴⁵⁶⁷⁸⁹".indexOf(c)))));
          const expected = end.value / data.units[effect].factor;
          // As printed: half a step of the last of the significant digits.
          const step = Math.max(Math.abs(expected), 1e-9) * 10 ** (1 - data.significant);
          read += 1;
          if (!values.some((value) => Math.abs(value - expected) <= step)) wrong.push({ id, effect, x: end.x, cell, expected });
        }
      }
    }
    return { figures: Object.keys(data.figures).length, wrong, read };
  }, members);
  assert.ok(figures > 0 && read > 2 * figures, `${figures} diagrams, ${read} readings`);
  assert.deepEqual(wrong, []);
});

onEach("a diagram is read by keyboard, pointer and touch, and shows one combination", {}, async (page) => {
  const figure = page.locator("figure:has(.read)").first();
  await figure.scrollIntoViewIfNeeded();
  const slider = figure.locator("input[type=range]");
  await slider.focus();
  await page.keyboard.press("Home");
  assert.match(await slider.getAttribute("aria-valuetext"), /^x = 0 /);
  await page.keyboard.press("ArrowRight");
  assert.doesNotMatch(await slider.getAttribute("aria-valuetext"), /^x = 0 /);
  const { width } = await figure.locator("svg").boundingBox();
  await figure.locator("svg").hover({ position: { x: width - 1, y: 20 } });
  assert.equal(await slider.inputValue(), await slider.getAttribute("max"));
  await figure.locator("select").selectOption({ index: 1 });
  assert.ok((await figure.locator("path.chosen").count()) > 0);
  const row = figure.locator("tbody tr").first().locator("td");
  assert.equal(await row.nth(0).textContent(), await row.nth(2).textContent(), "one combination has one value");
});

onEach("tables filter", {}, async (page) => {
  const filter = page.locator(".filter:has(select)").first();
  const rows = page.locator(".filter:has(select) + .table").first().locator("tbody tr");
  const all = await rows.count();
  const word = (await rows.first().locator("th").textContent()).trim();
  await filter.locator("select").selectOption(word);
  const some = await rows.filter({ visible: true }).count();
  assert.ok(some > 0 && some < all, `${some} of ${all}`);
  for (const key of await rows.filter({ visible: true }).locator("th").allTextContents()) assert.equal(key.trim(), word);
  await filter.locator("input").fill("no row has these words");
  assert.equal(await rows.filter({ visible: true }).count(), 0);
  await filter.locator("input").fill("");
  await filter.locator("select").selectOption("");
  assert.equal(await rows.filter({ visible: true }).count(), all);
});

onEach("every check and figure can be referred to", {}, async (page, { demo }) => {
  await page.context().grantPermissions(["clipboard-read", "clipboard-write"]);
  const { project, checks } = record(demo);
  const bare = await page.evaluate(() => [...document.querySelectorAll("figure[id]")].filter((figure) => !figure.querySelector(".reference")).length);
  assert.equal(bare, 0);
  const id = checks[0].id;
  const button = page.locator("h2 .reference").and(page.locator(`[aria-label*="${id}:"]`)).first();
  await button.click();
  const copied = await page.evaluate(() => navigator.clipboard.readText());
  assert.ok(copied.startsWith(`${project.number} rev ${project.revisions.at(-1).mark}, `), copied);
  assert.ok(copied.includes(`${id}: `), copied);
  assert.match(new URL(page.url()).hash, /^#./);
});

onEach("nothing overflows, from the phone to the wide screen", {}, async (page) => {
  for (const width of [360, 768, 1000, 1300, 1900]) {
    await page.setViewportSize({ width, height: 800 });
    const wide = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
    assert.equal(wide, 0, `at ${width} px`);
  }
  await page.setViewportSize(WIDE);
});

/** What the accessibility checker finds. */
async function violations(page, options) {
  await page.evaluate(axe);
  return page.evaluate(async (options) => {
    const { violations } = await axe.run(document, { resultTypes: ["violations"], ...options });
    return violations.map(({ id, help, nodes }) => ({ id, help, count: nodes.length, first: nodes[0].html.slice(0, 200), why: nodes[0].failureSummary }));
  }, options);
}

onEach("the accessibility checker finds nothing", {}, async (page) => {
  assert.deepEqual(await violations(page, {}), []);
});

onEach("colours keep their contrast in the dark", {}, async (page) => {
  await page.emulateMedia({ colorScheme: "dark" });
  assert.deepEqual(await violations(page, { runOnly: ["color-contrast"] }), []);
  await page.emulateMedia({ colorScheme: "light" });
});

onEach("the dark scheme is dark, drawings too", {}, async (page) => {
  await page.emulateMedia({ colorScheme: "dark" });
  const light = await page.evaluate(() => {
    const lightness = (colour) => colour.match(/\d+/g).slice(0, 3).reduce((sum, part) => sum + Number(part), 0) / 765;
    const style = (selector) => getComputedStyle(document.querySelector(selector));
    return {
      page: lightness(style("body").backgroundColor),
      text: lightness(style("body").color),
      drawing: lightness(style("figure svg").backgroundColor),
      line: lightness(style("figure svg path.sf-axis, figure svg path").stroke),
    };
  });
  assert.ok(light.page < 0.2 && light.drawing < 0.2, JSON.stringify(light));
  assert.ok(light.text > 0.7 && light.line > 0.4, JSON.stringify(light));
  await page.emulateMedia({ colorScheme: "light" });
});

onEach("paper shows no control", {}, async (page) => {
  await page.emulateMedia({ media: "print" });
  const shown = await page.evaluate(() => [...document.querySelectorAll("button, input, select, .reading")].filter((element) => element.getClientRects().length > 0).map((element) => element.outerHTML.slice(0, 80)));
  assert.deepEqual(shown, []);
  await page.emulateMedia({ media: null });
});

onEach("without scripts everything is there and no control stands idle", { javaScriptEnabled: false }, async (page, { demo }) => {
  assert.equal(await page.locator("button, input, select").count(), 0);
  for (const figure of await page.locator("figure").all()) assert.ok((await figure.boundingBox()).height > 20);
  const hidden = await page.locator(":is(p, table, h1, h2, li):not(:visible)").count();
  assert.equal(hidden, 0);
  const text = await page.locator("main").textContent();
  for (const { id } of record(demo).checks) assert.ok(text.includes(id), id);
});

onEach("the skip link comes first and leads to the first chapter", { colorScheme: "light" }, async (page) => {
  await page.keyboard.press("Tab");
  assert.equal(await page.evaluate(() => document.activeElement.className), "skip");
  await page.keyboard.press("Enter");
  assert.match(new URL(page.url()).hash, /^#1-/);
});
