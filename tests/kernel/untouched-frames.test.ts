import { describe, expect, test } from 'vitest';
import { reach } from '#engine/flood/reach.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { reservedTreatment } from '#engine/trace/reserved-groups.ts';
import { changed } from './changed.ts';
import { frameOf } from './frames.ts';
import { kernelLack } from './kernel-lack.ts';
import { withLab } from './lab.ts';
import { wholePortDesign } from './whole-port-design.ts';

// IEEE 802.1Q-2022 table 9-1, from memory: the TPIDs of customer and service tags.
const customer = 0x8100;
const service = 0x88a8;

const tagged = [
  { what: 'no tag', tags: [], vlan: undefined },
  { what: 'one tag', tags: [{ tpid: customer, tci: 110 }], vlan: 110 },
  { what: 'one tag with priority bits', tags: [{ tpid: customer, tci: 0xe000 | 110 }], vlan: 110 },
  {
    what: 'two tags',
    tags: [
      { tpid: service, tci: 110 },
      { tpid: customer, tci: 300 },
    ],
    vlan: 110,
  },
  {
    what: 'two tags of one kind',
    tags: [
      { tpid: customer, tci: 110 },
      { tpid: customer, tci: 300 },
    ],
    vlan: 110,
  },
  {
    what: 'VLAN 0, which is a priority and no VLAN',
    tags: [{ tpid: customer, tci: 0xa000 }],
    vlan: undefined,
  },
] as const;

/** What equipment says that is such a kernel: its bridges hand on the frames of spanning tree, which they take no part in. */
const ofKernel = changed(wholePortDesign(), {
  profiles: { linux: { name: 'Bridge in a kernel', reservedGroups: { '00': 'pass' } } },
  devices: { 'fw-gul': { profile: 'linux' }, 'fw-orr': { profile: 'linux' } },
});

describe.skipIf(kernelLack !== undefined)('a port that is carried whole', () => {
  const design = wholePortDesign();
  const network = indexNetwork(design);

  test('brings frames with any tags to the far port byte for byte, as the engine says', async () => {
    await withLab(design, async (lab) => {
      for (const { tags, vlan } of tagged) {
        const predicted = reach(network, { device: 'fw-gul', port: 'lan2', vlan }, { frame: 'other' });
        expect(predicted.tunnels).toEqual(['tn-gul-orr-a']);
        const hex = frameOf({ from: 0, tags });
        const { captured } = await lab.probe.exchange({
          frames: [{ from: 'h-gul', hex }],
          atLeast: { 'h-orr': 1 },
        });
        expect(captured['h-orr']).toEqual([[hex, 1]]);
        expect(captured['h-gul']).toEqual([]);
      }
    });
  });

  test('passes bridges’ own frames to the far port and none of the other reserved group addresses', async () => {
    const groups = Array.from({ length: 16 }, (_, i) => i.toString(16).padStart(2, '0'));
    const frames = groups.map((group) => ({
      from: 'h-gul',
      hex: frameOf({ from: 0, to: `01:80:c2:00:00:${group}` }),
    }));
    const networkOfKernel = indexNetwork(ofKernel);
    const predicted = groups.filter((group) =>
      ['fw-gul', 'fw-orr'].every((device) => {
        const at = { isAggregate: false, hasSpanningTree: false };
        return reservedTreatment(networkOfKernel, device, group, at).treatment === 'pass';
      }),
    );
    await withLab(ofKernel, async (lab) => {
      const { captured } = await lab.probe.exchange({ frames });
      const arrived = captured['h-orr']!.map(([hex]) => hex.slice(10, 12));
      expect(arrived).toEqual(predicted);
      expect(arrived).toEqual(['00']);
    });
  });
});
