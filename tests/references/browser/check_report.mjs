// Opens reports in headless Chromium and checks what only a browser shows: no
// console error, no request to anything outside the page, zoom, layers and the
// value under the pointer, print on A4 and US Letter, labels that neither
// collide nor are cut, a phone's width, and accessibility by axe-core.
//
//   node check_report.mjs MIRRORWELL PLAN REPORT PAGES_FROM PAGES_TO
//
// The value under the pointer is held against `MIRRORWELL heads PLAN`.
import { spawnSync } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { createRequire } from "node:module";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { pathToFileURL } from "node:url";
import { chromium } from "playwright-core";

const [program, plan, report, pagesFrom, pagesTo] = process.argv.slice(2);
const axe = readFileSync(createRequire(import.meta.url).resolve("axe-core/axe.min.js"), "utf8");
const address = pathToFileURL(resolve(report)).href;
const faults = [];

function hold(condition, fault) {
  if (!condition) faults.push(fault);
}

async function openedPage(browser, options) {
  const context = await browser.newContext({ ...options, offline: false });
  await context.route("**/*", (route) => {
    if (route.request().url() === address) return route.continue();
    faults.push(`a request left the page: ${route.request().url().slice(0, 200)}`);
    return route.abort();
  });
  const page = await context.newPage();
  page.on("console", (message) => {
    if (["error", "warning"].includes(message.type())) faults.push(`console: ${message.text()}`);
  });
  page.on("pageerror", (error) => faults.push(`script: ${error.message}`));
  page.on("dialog", (dialog) => {
    faults.push(`a dialog opened: ${dialog.message()}`);
    return dialog.dismiss();
  });
  await page.goto(address);
  return page;
}

async function checkAccessibility(page, where) {
  // Through the debugger, so that the page's own policy stays as it is.
  await page.evaluate(axe);
  const { violations } = await page.evaluate(() => axe.run(document, { resultTypes: ["violations"] }));
  for (const violation of violations) {
    const first = violation.nodes[0];
    faults.push(`accessibility, ${where}: ${violation.id}: ${violation.help}: ${first.html.slice(0, 200)}: ${first.failureSummary}`);
  }
}

async function checkWidth(page, where) {
  const [content, window] = await page.evaluate(() => [document.documentElement.scrollWidth, window.innerWidth]);
  hold(content <= window, `${where}: the page is ${content} px wide in a window of ${window} px`);
}

// Labels of a map: no two cover each other, none is cut off by the picture.
async function checkLabels(page) {
  const found = await page.evaluate(() => {
    const told = [];
    for (const svg of document.querySelectorAll("svg.map, svg.section")) {
      const sheet = svg.getBoundingClientRect();
      const texts = [...svg.querySelectorAll("text:not(.halo)")];
      const boxes = texts.map((text) => [text.textContent, text.getBoundingClientRect()]);
      const names = boxes.filter(([, box]) => box.width > 0);
      names.forEach(([name, box], index) => {
        if (box.left < sheet.left - 1 || box.right > sheet.right + 1 || box.top < sheet.top - 1 || box.bottom > sheet.bottom + 1) {
          told.push(`"${name}" is cut off`);
        }
        for (const [other, second] of names.slice(index + 1)) {
          const wide = Math.min(box.right, second.right) - Math.max(box.left, second.left);
          const high = Math.min(box.bottom, second.bottom) - Math.max(box.top, second.top);
          const smaller = Math.min(box.width * box.height, second.width * second.height);
          if (wide > 0 && high > 0 && wide * high > 0.25 * smaller) told.push(`"${name}" and "${other}" cover each other`);
        }
      });
    }
    return told;
  });
  faults.push(...found);
}

const viewOf = (figure) => figure.locator("g.view").getAttribute("transform");
const barOf = (figure) => figure.locator("g.scale text").nth(1).textContent();
async function symbolSize(figure) {
  return (await figure.locator("g[data-layer=wells] .keep").first().boundingBox()).width;
}

async function checkZoom(page, figure) {
  const bar = await barOf(figure);
  const size = await symbolSize(figure);
  for (let clicks = 0; clicks < 3; clicks += 1) await figure.getByRole("button", { name: "Zoom in" }).click();
  const view = await viewOf(figure);
  hold(/scale\(4\.09\d*\)/.test(view), `three clicks do not zoom by 1.6³: ${view}`);
  hold((await barOf(figure)) !== bar, "the scale bar does not follow the zoom");
  hold(Math.abs((await symbolSize(figure)) / size - 1) < 0.02, "symbols grow with the map");
  const box = await figure.locator("svg.map").boundingBox();
  const [x, y] = [box.x + box.width / 2, box.y + Math.min(box.height, 400) / 2];
  await page.mouse.move(x, y);
  await page.mouse.down();
  await page.mouse.move(x + 40, y + 25, { steps: 4 });
  await page.mouse.up();
  hold((await viewOf(figure)) !== view, "dragging does not move the map");
  await figure.locator(".sheet .scroll").focus();
  const moved = await viewOf(figure);
  await page.keyboard.press("ArrowRight");
  hold((await viewOf(figure)) !== moved, "arrow keys do not move the map");
  await figure.getByRole("button", { name: "Whole map" }).click();
  hold(/scale\(1\)/.test(await viewOf(figure)), "the whole map does not come back");
  hold((await barOf(figure)) === bar, "the scale bar does not come back");
}

async function checkLayers(figure) {
  for (const box of await figure.getByRole("checkbox").all()) {
    const layer = await box.getAttribute("value");
    const group = figure.locator(`g[data-layer="${layer}"]`).first();
    const isShown = () => group.evaluate((element) => getComputedStyle(element).display !== "none");
    await box.uncheck();
    hold(!(await isShown()), `${layer} cannot be hidden`);
    await box.check();
    hold(await isShown(), `${layer} cannot be shown again`);
  }
}

// What `heads` says at a place: head and drawdown.
function headsAt(x, y) {
  const asked = spawnSync(program, ["heads", plan, "--points", "-"], { input: `x,y\n${x},${y}\n`, encoding: "utf8" });
  const [, , , head, drawdown] = asked.stdout.split("\n")[1].split(",");
  return { head: Number(head), drawdown: Number(drawdown) };
}

// Places are told to the whole unit and values are interpolated, so that they
// agree to a twentieth of a unit away from wells (common practice, no source).
async function checkPointer(page, figure) {
  const quantity = await figure.getAttribute("data-quantity");
  const box = await figure.locator("svg.map").boundingBox();
  let told = 0;
  for (const [u, v] of [[0.35, 0.75], [0.45, 0.3], [0.55, 0.85], [0.3, 0.65], [0.6, 0.5]]) {
    await page.mouse.move(box.x + u * box.width, box.y + v * box.height);
    const text = await figure.locator(".readout").textContent();
    const found = text.match(/^East ([−\d,.]+), north ([−\d,.]+): (.+)$/);
    if (!found) {
      faults.push(`no value under the pointer: ${text}`);
      continue;
    }
    const number = (part) => Number(part.replaceAll(",", "").replace("−", "-"));
    const exact = headsAt(number(found[1]), number(found[2]))[quantity];
    const value = found[3].match(/^(head|drawdown) ([−\d,.]+) (m|ft)$/);
    if (value) {
      told += 1;
      hold(Math.abs(number(value[2]) - exact) < 0.05, `${text}, but it is ${exact}`);
    } else {
      hold(found[3] === "outside the aquifer", text);
    }
  }
  hold(told > 0, `the map of ${quantity} told no value`);
}

async function checkPrint(page) {
  for (const format of ["A4", "Letter"]) {
    const pdf = await page.pdf({ format });
    const pages = pdf.toString("latin1").match(/\/Type\s*\/Page\b/g).length;
    console.log(`  ${format}: ${pages} pages`);
    hold(pages >= Number(pagesFrom) && pages <= Number(pagesTo), `${format}: ${pages} pages, not ${pagesFrom} to ${pagesTo}`);
  }
}

// On a phone the middle of each map is seen first.
async function checkPhone(page) {
  const off = await page.evaluate(() => [...document.querySelectorAll(".sheet .scroll")].map((strip) => {
    return Math.abs(strip.scrollLeft - (strip.scrollWidth - strip.clientWidth) / 2);
  }));
  hold(off.every((pixels) => pixels < 2), `the maps are scrolled ${off} px off their middles`);
}

async function checkWithoutScript(browser) {
  const page = await openedPage(browser, { javaScriptEnabled: false, viewport: { width: 1280, height: 800 } });
  hold(!(await page.locator(".controls").first().isVisible()), "controls without a script to serve them");
  for (const part of ["h1", "svg.map", "svg.section", "#table-wells", ".review"]) {
    hold(await page.locator(part).first().isVisible(), `without script there is no ${part}`);
  }
  await page.context().close();
}

const profile = mkdtempSync(join(tmpdir(), "report-browser-"));
const browser = await chromium.launch({
  executablePath: process.env.CHROMIUM ?? "/usr/bin/chromium",
  args: [
    "--headless", "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run",
    "--disable-background-networking", "--disable-component-update", "--disable-sync",
    `--disk-cache-dir=${profile}`,
  ],
});
try {
  for (const [width, height] of [[1280, 800], [1920, 1080], [360, 740]]) {
    const page = await openedPage(browser, { viewport: { width, height } });
    await checkWidth(page, `at ${width} px`);
    await checkAccessibility(page, `at ${width} px`);
    if (width === 1280) {
      await checkLabels(page);
      for (const figure of await page.locator(".map-figure").all()) {
        await figure.scrollIntoViewIfNeeded();
        await checkZoom(page, figure);
        await checkLayers(figure);
        await checkPointer(page, figure);
      }
      await checkPrint(page);
    }
    if (width === 360) await checkPhone(page);
    hold((await page.evaluate(() => window.hit)) === undefined, "a name ran as a script");
    await page.context().close();
  }
  await checkWithoutScript(browser);
} finally {
  await browser.close();
  rmSync(profile, { recursive: true, force: true });
}
for (const fault of faults) console.error(`fault: ${fault}`);
console.log(`${report}: ${faults.length === 0 ? "sound in a browser" : `${faults.length} faults`}`);
process.exit(faults.length === 0 ? 0 : 1);
