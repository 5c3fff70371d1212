import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { canComeUp } from '#engine/network/can-come-up.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { forwardSecrecyMismatch } from '#engine/rules/forward-secrecy-mismatch.ts';
import { tunnelCapacity } from '#engine/rules/tunnel-capacity.ts';
import type { Stack } from '#engine/wire/stack.ts';
import { stackLayers } from '#engine/wire/stack-layers.ts';
import { frameOf, ipv4Packet, macOf, underlayPacketOf } from './frames.ts';
import type { IkeDaemons } from './ike-daemons.ts';
import { startIkeDaemons } from './ike-daemons.ts';
import { ipsecCases, ipsecDesign, namesOf } from './ipsec-design.ts';
import { ipsecLack } from './kernel-lack.ts';
import type { Lab } from './lab.ts';
import { raiseLab } from './lab.ts';

const design = ipsecDesign();
const network = indexNetwork(design);
const cases = ipsecCases.map(({ what }, index) => ({ what, index, ...namesOf(index) }));
const isUp = (tunnel: string): boolean => canComeUp(network, { collection: 'tunnels', id: tunnel }).up;
const working = cases.filter(({ tunnel }) => isUp(tunnel));

// The daemon's own interface takes IP packets up to 1400 bytes; VXLAN adds 50.
const innerLengths = [46, 64, 576, 1279, 1280, 1281, 1282, 1283, 1284, 1285, 1286, 1287, 1288, 1350];

/** The daemon puts ESP into UDP whatever stands in between, and a virtual port sends short frames as they are. */
const measuredStack = (tunnel: string): Stack => {
  const { stack } = tunnelCapacity(network, tunnel, 0)!;
  if (stack.esp.mode === 'none') throw new Error(`${tunnel} is not protected`);
  return { ...stack, innerFrames: 'as-sent', esp: { ...stack.esp, natTraversal: true } };
};

const pause = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

describe.skipIf(ipsecLack !== undefined)('an association', () => {
  let lab: Lab;
  let daemons: IkeDaemons;

  beforeAll(async () => {
    lab = await raiseLab(design);
    daemons = await startIkeDaemons(design);
    const isSettled = async (): Promise<boolean> => {
      const up = await daemons.upAt('fw-s0');
      return working.every(({ association }) => up.has(association));
    };
    for (const startedAt = Date.now(); Date.now() - startedAt < 20_000 && !(await isSettled());)
      await pause(200);
    // What is not to come up gets as long again as an association takes.
    await pause(1_000);
  });

  afterAll(async () => {
    await daemons?.end();
    await lab?.remove();
  });

  test('comes up exactly where the engine says so', async () => {
    const up = await daemons.upAt('fw-s0');
    expect(cases.filter(({ association }) => up.has(association)).map(({ what }) => what)).toEqual(
      working.map(({ what }) => what),
    );
    expect(working.length).toBeGreaterThan(0);
    expect(working.length).toBeLessThan(cases.length);
  });

  test.each(cases)(
    'carries frames exactly where the engine says so: $what',
    async ({ tunnel, host, index }) => {
      const hex = frameOf({ from: index + 1, to: macOf(0) });
      const { captured } = await lab.probe.exchange({
        frames: [{ from: host, hex }],
        atLeast: isUp(tunnel) ? { 'h-s0-a': 1 } : {},
      });
      expect(captured['h-s0-a']!.some(([frame]) => frame === hex)).toBe(isUp(tunnel));
    },
  );

  test.each(working)(
    'makes ESP packets as long as the engine computes: $what',
    async ({ tunnel, host, landing, index }) => {
      const stack = measuredStack(tunnel);
      const predicted = innerLengths.map((innerPacketBytes) => {
        const answer = stackLayers({ innerPacketBytes, innerIpVersion: 'ipv4', stack });
        if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
        return answer.totals.outerIpPacketBytes;
      });
      const frames = innerLengths.map((innerPacketBytes) => ({
        from: host,
        hex: frameOf({
          from: index + 1,
          to: macOf(0),
          etherType: 0x0800,
          payload: ipv4Packet(innerPacketBytes, innerPacketBytes),
        }),
      }));
      const underlay = `underlay ${landing}`;
      const { captured } = await lab.probe.exchange({ frames, atLeast: { [underlay]: frames.length } });
      const lengths = captured[underlay]!.flatMap(([frame]) => {
        const packet = underlayPacketOf(frame);
        return packet?.udpPort === 4500 ? [packet.ipPacketBytes] : [];
      });
      expect(lengths.sort((x, y) => x - y)).toEqual(predicted);
    },
  );

  test('that is up renews its keys exactly where the check of forward secrecy finds nothing', async () => {
    const told = new Set(
      forwardSecrecyMismatch.check(network, {}).flatMap(({ elements }) => elements.map(({ id }) => id)),
    );
    const renewed = await daemons.renewAt(
      'fw-s0',
      working.map(({ association }) => association),
    );
    expect(
      working.filter(({ association }) => renewed.get(association) !== true).map(({ what }) => what),
    ).toEqual(working.filter(({ association }) => told.has(association)).map(({ what }) => what));
    expect(told.size).toBe(2);
    // What could not renew its keys still has the first ones.
    const up = await daemons.upAt('fw-s0');
    for (const { association } of working) expect(up).toContain(association);
  });
});
