import { mkdirSync } from 'node:fs';
import { loadavg, tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { chromium, type Page } from 'playwright-core';
import { build, preview } from 'vite';
import { chromiumProgram, ensureChromium } from '../../../server/bootstrap/chromium.mjs';
import { routeWhileDragging } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { hubDesign } from '../../support/designs.ts';
import { largeDesign } from '../large-design.ts';
import type {} from './bench-window.ts';

/**
 * How smoothly a large sheet moves in Chromium: milliseconds a frame while it is panned, zoomed and a device is dragged, beside
 * the canvas library alone with as many plain nodes and edges, in one run. `npm run bench:sheet`, `npm run bench:sheet -- 200`.
 */

const [asked = '1000'] = process.argv.slice(2);
const devices = Number(asked);
if (!Number.isInteger(devices) || devices < 10) {
  console.error(`Expected a number of devices from 10, such as 1000; got '${asked}'.`);
  process.exit(1);
}

const gestures = ['pan', 'zoom', 'drag'] as const;
type Gesture = (typeof gestures)[number];
const stepsOfAGesture = 60;

interface Frames {
  readonly medianMs: number;
  readonly p95Ms: number;
}

const at = (sorted: readonly number[], share: number): number =>
  sorted[Math.min(sorted.length - 1, Math.floor(sorted.length * share))]!;
const framesOf = (times: readonly number[]): Frames => {
  const sorted = [...times].sort((a, b) => a - b);
  return { medianMs: at(sorted, 0.5), p95Ms: at(sorted, 0.95) };
};
const shown = ({ medianMs, p95Ms }: Frames): string =>
  `${medianMs.toFixed(1).padStart(7)} ms a frame, p95 ${p95Ms.toFixed(1)}`;

/** The times between frames while something goes on. */
const framesDuring = async (page: Page, act: () => Promise<void>): Promise<Frames> => {
  await page.evaluate(() => window.beginFrames());
  await act();
  return framesOf(await page.evaluate(() => window.endFrames()));
};

const middle = { x: 720, y: 450 };
const acts: { readonly [gesture in Gesture]: (page: Page) => Promise<void> } = {
  pan: async (page) => {
    await page.mouse.move(middle.x, middle.y);
    await page.mouse.down({ button: 'middle' });
    for (let step = 1; step <= stepsOfAGesture; step += 1)
      await page.mouse.move(middle.x + 6 * Math.min(step, stepsOfAGesture - step), middle.y + 2 * step);
    await page.mouse.up({ button: 'middle' });
  },
  zoom: async (page) => {
    await page.mouse.move(middle.x, middle.y);
    await page.keyboard.down('Control');
    for (let step = 0; step < stepsOfAGesture; step += 1)
      await page.mouse.wheel(0, step < stepsOfAGesture / 2 ? -60 : 60);
    await page.keyboard.up('Control');
  },
  drag: async (page) => {
    const node = page.locator('.react-flow__node').filter({ visible: true });
    const boxes = await node.evaluateAll((all) =>
      all.map((each) => {
        const { x, y, width, height } = each.getBoundingClientRect();
        return { x: x + width / 2, y: y + height / 2, area: width * height };
      }),
    );
    // The smallest near the middle is a device and no site.
    const [grip] = boxes
      .filter(({ x, y }) => Math.hypot(x - middle.x, y - middle.y) < 400)
      .sort((a, b) => a.area - b.area);
    if (grip === undefined) throw new Error('There is no node near the middle of the screen.');
    await page.mouse.move(grip.x, grip.y);
    await page.mouse.down();
    for (let step = 1; step <= stepsOfAGesture; step += 1)
      await page.mouse.move(grip.x + 3 * Math.min(step, stepsOfAGesture - step), grip.y + step);
    await page.mouse.up();
  },
};

const measure = async (
  url: string,
  design: Design,
): Promise<{
  readonly firstMs: number;
  readonly parts: { readonly nodes: number; readonly edges: number };
  readonly frames: { readonly [gesture in Gesture]: Frames };
}> => {
  const browser = await chromium.launch({
    executablePath: chromiumProgram,
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
    ],
  });
  const page = await browser.newPage({ viewport: { width: 1440, height: 900 } });
  page.on('pageerror', (error) => console.error(error.message));
  await page.addInitScript(
    (document) => {
      (window as unknown as { benchDesign: unknown }).benchDesign = document;
    },
    design as unknown as object,
  );
  const startedAt = performance.now();
  await page.goto(url);
  await page.locator('.react-flow__node').first().waitFor();
  const firstMs = performance.now() - startedAt;
  await page.waitForTimeout(1_500);
  const frames = {} as { [gesture in Gesture]: Frames };
  for (const gesture of gestures) {
    frames[gesture] = await framesDuring(page, () => acts[gesture](page));
    await page.waitForTimeout(800);
  }
  const parts = await page.evaluate(() => window.benchParts!);
  await browser.close();
  return { firstMs, parts, frames };
};

/** CPU time that the routing of one step of a drag takes, with so many associations on the sheet. */
const dragSteps = (jackets: number): Frames => {
  const bare = hubDesign(jackets);
  const design = applyPatch(bare, tidy(bare));
  const times: number[] = [];
  for (let step = 0; step < 40; step += 1) {
    const moved = applyPatch(design, { layout: { devices: { 'fw-s1': { x: 400 + 3 * step, y: 300 } } } });
    const before = process.cpuUsage();
    routeWhileDragging(moved, design);
    const { user, system } = process.cpuUsage(before);
    times.push((user + system) / 1_000);
  }
  return framesOf(times.slice(5));
};

await ensureChromium({ say: console.log });
const root = fileURLToPath(new URL('.', import.meta.url));
const outDir = join(tmpdir(), `longpatch-bench-${process.pid}`);
mkdirSync(outDir, { recursive: true });
await build({
  root,
  configFile: fileURLToPath(new URL('../../../vite.config.ts', import.meta.url)),
  logLevel: 'error',
  build: { outDir, emptyOutDir: true },
});
const server = await preview({
  root,
  logLevel: 'error',
  build: { outDir },
  preview: { host: '127.0.0.1', port: 0 },
});
const url = server.resolvedUrls!.local[0]!;
const plain = largeDesign(devices);
const tidiedAt = performance.now();
const design = applyPatch(plain, tidy(plain));
console.log(
  `${devices} devices, ${Object.keys(design.links).length} links, ${Object.keys(design.tunnels).length} cords, load ${loadavg()[0]!.toFixed(1)}; laid out in ${(performance.now() - tidiedAt).toFixed(0)} ms`,
);
const library = await measure(`${url}?mode=bare`, design);
const sheet = await measure(`${url}?mode=sheet`, design);
console.log(
  `the library alone with ${library.parts.nodes} nodes and ${library.parts.edges} edges, first drawn after ${library.firstMs.toFixed(0)} ms; the sheet with ${sheet.parts.nodes} and ${sheet.parts.edges} after ${sheet.firstMs.toFixed(0)} ms`,
);
for (const gesture of gestures) {
  const [own, theirs] = [sheet.frames[gesture], library.frames[gesture]];
  console.log(
    `  ${gesture.padEnd(5)} sheet ${shown(own)}; library ${shown(theirs)}; ratio ${(own.medianMs / theirs.medianMs).toFixed(2)}`,
  );
}
const steps = dragSteps(100);
console.log(
  `  routing a step of a drag with 100 jackets, CPU time: median ${steps.medianMs.toFixed(1)} ms, p95 ${steps.p95Ms.toFixed(1)} ms${steps.p95Ms <= 16.7 ? ', within a frame' : ', MORE than a frame'}`,
);
await server.close();
