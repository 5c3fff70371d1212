import { availableParallelism, loadavg } from 'node:os';
import { indexNetwork } from '#engine/network/index-network.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { largestInnerPacket } from '#engine/wire/largest-inner-packet.ts';
import { bareStack } from '#engine/wire/stack.ts';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { route } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { hubDesign } from '../support/designs.ts';
import type { Measured, Work } from './engine-work.ts';
import { measureEngine } from './engine-work.ts';
import { largeDesign } from './large-design.ts';
import { heldBytes, timesOf } from './measure.ts';

/**
 * What the engine and the drawing cost on this machine in time of the processor, as medians, with the growth from one size to the next.
 * `npm run bench` measures all sizes, `npm run bench -- 1000` those named.
 */

const sizes = [10, 100, 1_000, 10_000];
const spokes = [5, 20, 60];

const spokesOfOneHub = 200;

const named = process.argv.slice(2).map(Number);
if (named.some((size) => !Number.isInteger(size) || size < 10)) {
  console.error(
    `Expected numbers of devices from 10, such as ${sizes.join(', ')}; got '${process.argv.slice(2).join(' ')}'.`,
  );
  process.exit(1);
}
const chosen = named.length > 0 ? named : sizes;

const withSpanningTree = (design: Design): Design =>
  applyPatch(design, {
    devices: Object.fromEntries(
      Object.entries(design.devices)
        .filter(([, { kind }]) => kind === 'switch')
        .map(([id]) => [id, { settings: { spanningTree: { mode: 'on' } } }]),
    ),
  });

const inMs = (ms: number): string => (ms < 1 ? ms.toFixed(3) : ms < 100 ? ms.toFixed(1) : ms.toFixed(0));

const growth = (before: Work | undefined, now: Work, factor: number): string =>
  before === undefined
    ? ''
    : `  x ${(now.times.medianMs / before.times.medianMs).toFixed(1)} for ${factor.toFixed(1)} times the devices`;

const bound = ({ boundMs, times }: Work, devices: number): string =>
  boundMs === undefined || devices !== 1_000
    ? ''
    : times.medianMs <= boundMs
      ? `  holds ${boundMs} ms`
      : `  MISSES ${boundMs} ms`;

console.log(
  `${availableParallelism()} cores, load ${loadavg()[0]!.toFixed(1)}: a load above the cores makes everything slower.`,
);

const report = (
  design: Design,
  devices: number,
  before?: { readonly size: number; readonly measured: Measured },
): Measured => {
  const measured = measureEngine(design);
  console.log(
    `\n${Object.entries(measured.counts)
      .map(([what, count]) => `${count} ${what}`)
      .join(', ')}`,
  );
  measured.work.forEach((work, i) => {
    const factor = before === undefined ? 1 : devices / before.size;
    console.log(
      `  ${work.what.padEnd(45)}${inMs(work.times.medianMs).padStart(9)} ms (least ${inMs(work.times.leastMs)})${bound(work, devices)}${growth(before?.measured.work[i], work, factor)}`,
    );
  });
  return measured;
};

let before: { readonly size: number; readonly measured: Measured } | undefined;
for (const size of chosen) {
  const design = largeDesign(size);
  const measured = report(design, size, before);
  for (const { what, ratio } of measured.ratios)
    console.log(`  storms take ${ratio.toFixed(2)} times what graphology takes for ${what}`);
  const kept = heldBytes(() => [floodGraph(indexNetwork(design)), runRules(design)]);
  console.log(`  memory beside the design itself: ${(kept / 1e6).toFixed(1)} MB`);
  before = { size, measured };
}

if (chosen.includes(1_000)) {
  console.log('\nSpanning tree on in every switch:');
  report(withSpanningTree(largeDesign(1_000)), 1_000);
  console.log(`\nOne hub with ${spokesOfOneHub} sites:`);
  report(hubDesign(spokesOfOneHub, { segments: ['a', 'b'] }), 1_000);
}

const stack = {
  ...bareStack,
  vxlanOver: 'ipv4' as const,
  esp: {
    mode: 'tunnel' as const,
    transform: 'aes-cbc' as const,
    natTraversal: true,
    outerIp: 'ipv4' as const,
  },
};
const largest = timesOf(
  () => undefined,
  () => {
    for (let mtu = 1_000; mtu < 2_000; mtu += 1)
      largestInnerPacket({ transportMtuBytes: mtu, innerIpVersion: 'ipv4', stack });
  },
);
console.log(`\nlargest inner packet: ${(largest.medianMs / 1_000).toFixed(4)} ms`);

for (const count of spokes) {
  const hub = hubDesign(count, { segments: ['a', 'b'] });
  const laidOut = applyPatch(hub, tidy(hub));
  const tidied = timesOf(() => structuredClone(hub), tidy);
  const routed = timesOf(() => structuredClone(laidOut), route);
  console.log(
    `a sheet of a hub and ${count} sites: tidy ${inMs(tidied.medianMs)} ms, route ${inMs(routed.medianMs)} ms`,
  );
}
