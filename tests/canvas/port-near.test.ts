import { expect, test } from 'vitest';
import { portNear } from '../../src/canvas/port-near.ts';
import { route } from '../../src/drawing/routing/route.ts';
import { pairDesign } from '../support/designs.ts';

const geometry = route(pairDesign({ hub: 'ha-pair' }));
const deviceOf = (id: string) => geometry.devices.find((device) => device.id === id)!;

test('a press on a pip means its port, and of a pair its member’s', () => {
  for (const id of ['sw-s0', 'fw-s0', 'h-s0-a']) {
    const ref = { collection: 'devices', id } as const;
    for (const pip of deviceOf(id).pips) {
      const found = portNear(geometry, ref, { x: pip.at.x + 2, y: pip.at.y - 1 });
      expect(found).toMatchObject({ ...ref, port: pip.port });
      expect(found.member).toBe(id === 'fw-s0' ? pip.member : undefined);
    }
  }
});

test('a press on a plate of a pair means that member, one between the plates the pair', () => {
  const ref = { collection: 'devices', id: 'fw-s0' } as const;
  const { plates } = deviceOf('fw-s0');
  for (const { rect, member } of plates)
    expect(portNear(geometry, ref, { x: rect.x + rect.width / 2, y: rect.y + 14 })).toEqual({
      ...ref,
      member,
    });
  const [first] = plates;
  const between = { x: first!.rect.x + 40, y: first!.rect.y + first!.rect.height + 7 };
  expect(portNear(geometry, ref, between)).toEqual(ref);
});

test('a press elsewhere means the device, and what is no device stays as it is', () => {
  const { rect } = deviceOf('sw-s0');
  const middle = { x: rect.x + rect.width / 2, y: rect.y + 14 };
  const device = { collection: 'devices', id: 'sw-s0' } as const;
  expect(portNear(geometry, device, middle)).toEqual(device);
  const cord = { collection: 'tunnels', id: 'tn-s0-s1-a' } as const;
  expect(portNear(geometry, cord, deviceOf('sw-s0').pips[0]!.at)).toEqual(cord);
});
