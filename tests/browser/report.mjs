// Opens report.html of a results folder in a headless browser and checks what a reader relies on.
// usage: BROWSER=/path/to/chromium node report.mjs RESULTS_FOLDER [SCREENSHOT_FOLDER]
import { readFileSync, statSync, mkdirSync, writeFileSync } from "node:fs";
import { execFileSync } from "node:child_process";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { pathToFileURL } from "node:url";
import { chromium } from "playwright-core";

const folder = resolve(process.argv[2]);
const pictures = process.argv[3];
const file = join(folder, "report.html");
const summary = JSON.parse(readFileSync(join(folder, "summary.json"), "utf8"));
let passed = 0;
let failed = 0;
const check = (name, holds, detail = "") => {
  if (holds) passed += 1;
  else {
    failed += 1;
    console.log(`FAILED: ${name} ${detail}`);
  }
};

const browser = await chromium.launch({
  executablePath: process.env.BROWSER,
  headless: true,
  args: [
    "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run",
    "--disable-background-networking", "--disable-component-update", "--disable-sync",
  ],
});

const open = async (options) => {
  const context = await browser.newContext(options);
  const page = await context.newPage();
  const problems = [];
  const requests = [];
  page.on("console", (message) => { if (["error", "warning"].includes(message.type())) problems.push(message.text()); });
  page.on("pageerror", (error) => problems.push(String(error)));
  page.on("dialog", (dialog) => { problems.push("dialog: " + dialog.message()); dialog.dismiss(); });
  page.on("request", (request) => requests.push(request.url()));
  const before = Date.now();
  await page.goto(pathToFileURL(file).href);
  return { context, page, problems, requests, milliseconds: Date.now() - before };
};

const sections = async (page) => page.$$eval("main section h2", (heads) => heads.map((head) => head.textContent.trim()));

// Numbers of tables and charts against summary.json, digit for digit.
const compareNumbers = async (page) => {
  const shown = new Set(await page.$$eval("#checks-surveyed [data-value]", (cells) => cells.map((cell) => Number(cell.dataset.value))));
  for (const one of summary.surveyed.checks) {
    check(`${one.check} ${one.situation} ${one.inputs}: demand in the table`, shown.has(one.demand_kpa), String(one.demand_kpa));
    if (one.utilization !== null) check(`${one.check} ${one.situation} ${one.inputs}: utilization in the table`, shown.has(one.utilization));
  }
  const marks = await page.$$eval(".charts [data-depth]", (all) => all.map((mark) => [Number(mark.dataset.depth), Number(mark.dataset.demand)]));
  const published = new Set(summary.depths.flatMap((depth) => depth.checks.map((one) => `${depth.depth_m} ${one.demand_kpa}`)));
  check("charts have marks", summary.depths.length === 0 || marks.length > 0);
  check("every mark of the charts is published", marks.every(([depth, demand]) => published.has(`${depth} ${demand}`)));
};

const useSlider = async (page) => {
  const slider = page.locator("#depth");
  check("slider is shown", await slider.isVisible());
  const last = Number(await slider.getAttribute("max"));
  const seen = new Set();
  for (let index = 0; index <= last; index += 1) {
    await slider.fill(String(index));
    seen.add(await page.locator("#depth-shown").textContent());
  }
  check("every depth is shown by the slider", seen.size === last + 1, [...seen].join());
  const before = await page.locator("#stage svg").innerHTML();
  await page.check("input[name=quantity][value=utilization]");
  check("the quantity can be changed", before !== (await page.locator("#stage svg").innerHTML()));
  const label = await page.locator("#stage svg").getAttribute("aria-label");
  check("the figure says what it shows", /utilization.*undercut depth \(horizontal\)/.test(label), label);
};

const hover = async (page) => {
  const figure = page.locator("#figure-stress-surveyed");
  await figure.scrollIntoViewIfNeeded();
  const box = await figure.locator("svg").boundingBox();
  const texts = new Set();
  for (let i = 1; i < 9; i += 1) {
    await page.mouse.move(box.x + (0.06 + 0.07 * i) * box.width, box.y + 0.75 * box.height);
    texts.add(await figure.locator(".readout").textContent());
  }
  check("hover shows values", [...texts].some((text) => /kPa (tension|compression)/.test(text)), [...texts].join(" | "));
  check("hover follows the pointer", texts.size > 3);
  await figure.locator(".scroll").focus();
  const before = await figure.locator(".readout").textContent();
  await page.keyboard.press("ArrowUp");
  check("arrow keys move the place", before !== (await figure.locator(".readout").textContent()));
};

const sort = async (page) => {
  const column = () => page.$$eval("#checks-surveyed tbody tr", (rows) => rows.map((row) => Number(row.cells[2].dataset.value)));
  await page.locator("#checks-surveyed thead th").nth(2).locator("[role=button]").click();
  const rising = await column();
  check("tables sort upward", rising.every((value, i) => i === 0 || rising[i - 1] <= value), rising.join());
  await page.locator("#checks-surveyed thead th").nth(2).locator("[role=button]").click();
  const falling = await column();
  check("tables sort downward", falling.every((value, i) => i === 0 || falling[i - 1] >= value));
};

const FORBIDDEN = /(?<![\w-])(safe|stable|ok|pass|passes|low risk)(?![\w-])/i;

const desktop = async () => {
  const { context, page, problems, requests, milliseconds } = await open({ viewport: { width: 1280, height: 900 } });
  check("no outside request", requests.every((url) => url.startsWith("file:")) && requests.length === 1, requests.join());
  check("opens within a second", milliseconds < 1000 || process.env.CI !== undefined, `${milliseconds} ms`);
  check("smaller than 3 MB", statSync(file).size < 3e6, String(statSync(file).size));
  await compareNumbers(page);
  const text = await page.evaluate(() => {
    const copy = document.body.cloneNode(true);
    copy.querySelectorAll("pre, script, template").forEach((node) => node.remove());
    return copy.textContent;
  });
  check("no word promises anything", !FORBIDDEN.test(text), (FORBIDDEN.exec(text) || []).join());
  check("draft mark", summary.report.checked_by !== null || text.includes("DRAFT, NOT CHECKED"));
  await useSlider(page);
  await hover(page);
  await sort(page);
  const overlapping = await page.evaluate(overlaps);
  check("no labels overlap", overlapping.length === 0, overlapping.slice(0, 5).join(" || "));
  check("no console error", problems.length === 0, problems.join(" | "));
  if (pictures) await page.screenshot({ path: join(pictures, "desktop.png"), fullPage: true });
  await context.close();
};

// Texts of one picture whose boxes cover each other by more than a sliver. Runs inside the page.
function overlaps() {
  const found = [];
  for (const svg of document.querySelectorAll("figure svg")) {
    const texts = [...svg.querySelectorAll("text")].map((node) => [node.textContent, node.getBoundingClientRect()]).filter(([, box]) => box.width > 0);
    texts.forEach(([text, a], i) => {
      for (const [other, b] of texts.slice(i + 1)) {
        const wide = Math.min(a.right, b.right) - Math.max(a.left, b.left);
        const high = Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top);
        if (wide > 2 && high > 0.35 * Math.min(a.height, b.height)) found.push(`${svg.getAttribute("aria-label")}: "${text}" on "${other}"`);
      }
      const frame = svg.getBoundingClientRect();
      if (a.left < frame.left - 1 || a.right > frame.right + 1 || a.bottom > frame.bottom + 1 || a.top < frame.top - 1) found.push(`${svg.getAttribute("aria-label")}: "${text}" is cut`);
    });
  }
  return found;
}

const phone = async () => {
  const { context, page, problems } = await open({ viewport: { width: 380, height: 780 }, deviceScaleFactor: 2, isMobile: true, hasTouch: true });
  const wide = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
  check("the page is not wider than a phone", wide <= 1, `${wide} px`);
  check("no console error on a phone", problems.length === 0, problems.join(" | "));
  if (pictures) await page.screenshot({ path: join(pictures, "phone.png"), fullPage: true });
  await context.close();
};

const withoutScripts = async () => {
  const { context, page } = await open({ javaScriptEnabled: false, viewport: { width: 1280, height: 900 } });
  const html = await page.content();
  check("without scripts the figures are there", html.includes('id="figure-stress-surveyed"') && html.includes("<svg"));
  check("without scripts the slider is hidden", !(await page.locator("#explorer").isVisible()));
  await context.close();
};

const print = async () => {
  const { context, page } = await open({ viewport: { width: 1280, height: 900 } });
  const heads = await sections(page);
  const pdf = await page.pdf({ preferCSSPageSize: true, printBackground: true });
  const path = join(pictures || tmpdir(), `report-${process.pid}.pdf`);
  writeFileSync(path, pdf);
  try {
    const text = execFileSync("pdftotext", ["-layout", path, "-"], { encoding: "utf8", maxBuffer: 1 << 26 });
    const flat = text.replace(/\s+/g, " ");
    for (const head of heads) check(`print has the section "${head}"`, flat.includes(head.replace(/\s+/g, " ")));
    const pages = text.split("\f").filter((one) => one.trim() !== "");
    pages.forEach((one, i) => {
      check(`page ${i + 1} has its number`, one.includes(`Page ${i + 1} of ${pages.length}`));
      if (summary.report.checked_by === null) check(`page ${i + 1} is marked as a draft`, one.includes("DRAFT, NOT CHECKED"));
    });
  } catch (error) {
    if (error.code !== "ENOENT") throw error;
    console.log("SKIPPED, LOUDLY: no pdftotext here; the printed pages were NOT read");
  }
  await context.close();
};

try {
  if (pictures) mkdirSync(pictures, { recursive: true });
  await desktop();
  await phone();
  await withoutScripts();
  await print();
} finally {
  await browser.close();
}
console.log(`${passed} passed, ${failed} failed`);
process.exit(failed === 0 ? 0 : 1);
