import { describe, expect, test } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { tunnelCapacity } from '#engine/rules/tunnel-capacity.ts';
import { traceFrame } from '#engine/trace/trace-frame.ts';
import { fragmentsOf } from '#engine/wire/fragments-of.ts';
import type { TagCount } from '#engine/wire/stack.ts';
import { stackLayers } from '#engine/wire/stack-layers.ts';
import { changed } from './changed.ts';
import { frameOf, ipv4Packet, underlayPacketOf } from './frames.ts';
import { kernelLack } from './kernel-lack.ts';
import type { Lab } from './lab.ts';
import { withLab } from './lab.ts';
import { wholePortDesign } from './whole-port-design.ts';

const tagCounts = [0, 1, 2] as const;
const tagsOf = (count: TagCount) =>
  Array.from({ length: count }, (_, i) => ({ tpid: i === 0 && count === 2 ? 0x88a8 : 0x8100, tci: 110 + i }));

let identification = 0;
const packetFrame = (packetBytes: number, tags: TagCount, isWhole = true): string =>
  frameOf({
    from: 0,
    to: '02:00:00:00:00:01',
    tags: tagsOf(tags),
    etherType: 0x0800,
    payload: ipv4Packet(packetBytes, (identification += 1), isWhole),
  });

const capacityOf = (design: Design, tags: TagCount) => {
  const capacity = tunnelCapacity(indexNetwork(design), 'tn-gul-orr-a', tags);
  if (capacity === undefined) throw new Error('the engine knows no largest packet for this tunnel');
  return capacity;
};

/** A virtual port sends short frames as they are. */
const outermostBytes = (design: Design, innerPacketBytes: number, tags: TagCount): number => {
  const answer = stackLayers({
    innerPacketBytes,
    innerIpVersion: 'ipv4',
    stack: { ...capacityOf(design, tags).stack, innerFrames: 'as-sent' },
  });
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer.totals.outerIpPacketBytes;
};

/** Sends a frame from Gullhaven: whether it came to Orrin Point, and the lengths of the packets on the underlay. */
const send = async (
  lab: Lab,
  hex: string,
  isToArrive = true,
): Promise<{ readonly arrived: boolean; readonly underlayBytes: readonly number[] }> => {
  const { captured } = await lab.probe.exchange({
    frames: [{ from: 'h-gul', hex }],
    atLeast: isToArrive ? { 'h-orr': 1 } : {},
    quietMs: 120,
  });
  return {
    arrived: captured['h-orr']!.some(([frame]) => frame === hex),
    underlayBytes: captured['underlay ld-gul-coast']!.flatMap(([frame]) => {
      const packet = underlayPacketOf(frame);
      // Neighbour discovery is no part of what is measured.
      return packet === undefined || (packet.udpPort === undefined && !packet.isFragment)
        ? []
        : [packet.ipPacketBytes];
    }),
  };
};

const paths = [4, 6].flatMap((family) =>
  [1500, 1492, 1400].map((transportMtuBytes) => ({ family: family as 4 | 6, transportMtuBytes })),
);

describe.skipIf(kernelLack !== undefined)('packet lengths in the kernel', () => {
  test.each(paths)(
    'the largest packet passes and none that is a byte longer: over IPv$family, MTU $transportMtuBytes',
    async (path) => {
      const design = wholePortDesign(path);
      await withLab(design, async (lab) => {
        await send(lab, packetFrame(100, 0));
        for (const tags of tagCounts) {
          const { largestBytes } = capacityOf(design, tags);
          const largest = await send(lab, packetFrame(largestBytes, tags));
          expect(largest).toEqual({ arrived: true, underlayBytes: [path.transportMtuBytes] });
          expect(outermostBytes(design, largestBytes, tags)).toBe(path.transportMtuBytes);
          const longer = await send(lab, packetFrame(largestBytes + 1, tags), false);
          expect(longer).toEqual({ arrived: false, underlayBytes: [] });
        }
      });
    },
  );

  test.each([4, 6] as const)('are those that the engine computes, over IPv%i', async (family) => {
    const design = wholePortDesign({ family });
    await withLab(design, async (lab) => {
      for (const tags of tagCounts)
        for (const packetBytes of [46, 47, 64, 576, 1280, 1399]) {
          const { arrived, underlayBytes } = await send(lab, packetFrame(packetBytes, tags));
          expect(arrived).toBe(true);
          expect(underlayBytes).toEqual([outermostBytes(design, packetBytes, tags)]);
        }
    });
  });

  test('are those of the fragments that the engine computes where the outer packet may be cut', async () => {
    const design = wholePortDesign({ outerDf: 'clear', transportMtuBytes: 1400 });
    await withLab(design, async (lab) => {
      for (const packetBytes of [1351, 1400, 1500]) {
        const cut = fragmentsOf(outermostBytes(design, packetBytes, 0), 'ipv4', 1400);
        if (!cut.ok) throw new Error(JSON.stringify(cut.problems));
        expect(cut.fragmented).toBe(true);
        const { arrived, underlayBytes } = await send(lab, packetFrame(packetBytes, 0, false));
        expect(arrived).toBe(true);
        expect([...underlayBytes].sort()).toEqual(cut.pieces.map((piece) => piece.packetBytes).sort());
      }
    });
  });

  test('are none where the host forbids to cut its packet, as the engine has it of a make that minds that', async () => {
    const port = { ports: { wan1: { mtu: 1400 } }, profile: 'linux' };
    const design = changed(wholePortDesign({ outerDf: 'clear', transportMtuBytes: 1400 }), {
      profiles: { linux: { name: 'Minds the DF inside', oversizeDf: 'icmp' } },
      devices: { 'fw-gul': port, 'fw-orr': port },
    });
    const predicted = (packetBytes: number, dontFragment: boolean): string => {
      const trace = traceFrame(design, {
        source: { host: 'h-gul' },
        destination: { kind: 'host', host: 'h-orr', learned: false },
        tags: [],
        packet: { kind: 'ip', version: 'ipv4', packetBytes, dontFragment },
      });
      if (!trace.ok) throw new Error(JSON.stringify(trace.problems));
      const crossing = trace.steps.find((step) => step.crossing?.collection === 'tunnels')!;
      return crossing.verdict?.code ?? (crossing.pieces === undefined ? 'whole' : 'cut');
    };
    await withLab(design, async (lab) => {
      for (const [packetBytes, isWhole, what] of [
        [1350, true, 'whole'],
        [1351, true, 'dropped'],
        [1351, false, 'cut'],
      ] as const) {
        expect(predicted(packetBytes, isWhole)).toBe(what);
        const { arrived, underlayBytes } = await send(
          lab,
          packetFrame(packetBytes, 0, isWhole),
          what !== 'dropped',
        );
        expect([arrived, underlayBytes.length]).toEqual([
          what !== 'dropped',
          { whole: 1, cut: 2, dropped: 0 }[what],
        ]);
      }
    });
  });
});
