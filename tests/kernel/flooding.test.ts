import { describe, expect, test } from 'vitest';
import { findStorms } from '#engine/flood/find-storms.ts';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { reach } from '#engine/flood/reach.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { hubDesign } from '../support/designs.ts';
import { measuredCopies, measuredTable, oneBroadcast, predictedCopies, predictedTable } from './flooding.ts';
import { quietDesigns, stormyDesigns } from './flooding-designs.ts';
import { frameOf, macOf } from './frames.ts';
import { kernelLack } from './kernel-lack.ts';
import { withLab } from './lab.ts';

describe.skipIf(kernelLack !== undefined)('a broadcast in the kernel', () => {
  test.each(quietDesigns)(
    'reaches the hosts that the engine names, in as many copies: $what',
    async ({ design, failing }) => {
      expect(findStorms(floodGraph(indexNetwork(design)))).toEqual([]);
      await withLab(design, async (lab) => {
        expect(await measuredCopies(design, lab)).toEqual(predictedCopies(design));
        for (const forwarder of Object.keys(design.forwarders)) {
          const predicted = predictedTable(design, forwarder);
          const measured = await measuredTable(design, lab, forwarder);
          expect([...measured.keys()].sort()).toEqual([...predicted.keys()].sort());
          for (const [host, circuits] of measured)
            expect(circuits.some((circuit) => predicted.get(host)!.includes(circuit))).toBe(true);
        }
        if (failing === undefined) return;
        await lab.failTunnel(failing);
        expect(await measuredCopies(design, lab)).toEqual(predictedCopies(design, [failing]));
      });
    },
  );

  test.each(stormyDesigns)('goes on for ever where the engine says so: $what', async ({ design }) => {
    const network = indexNetwork(design);
    const host = 'h-s0-a';
    const predicted = reach(network, { host }, { frame: 'other' });
    expect(findStorms(floodGraph(network))).not.toEqual([]);
    expect(predicted.storm).toBe(true);
    await withLab(design, async (lab) => {
      const { storm, copies } = await oneBroadcast(lab, host);
      expect(storm).toBe(true);
      const endless = predicted.deliveries.filter((delivery) => delivery.copies === 'endless');
      expect(endless.length).toBeGreaterThan(0);
      for (const delivery of endless) expect(copies.get(delivery.host) ?? 0).toBeGreaterThan(5);
      expect([...copies.keys()].sort()).toEqual(predicted.deliveries.map((delivery) => delivery.host));
    });
  });

  test('teaches bridges where a host is, so that what is sent to it alone goes nowhere else', async () => {
    const design = hubDesign(3, { join: { protectedBy: false } });
    await withLab(design, async (lab) => {
      await measuredCopies(design, lab);
      const { captured } = await lab.probe.exchange({
        frames: [{ from: 'h-s1-a', hex: frameOf({ from: 1, to: macOf(3) }) }],
      });
      const heard = Object.keys(lab.plan.hosts).filter((host) => captured[host]!.length > 0);
      expect(heard).toEqual(['h-s3-a']);
      expect(captured['h-s3-a']).toEqual([[frameOf({ from: 1, to: macOf(3) }), 1]]);
    });
  });
});
