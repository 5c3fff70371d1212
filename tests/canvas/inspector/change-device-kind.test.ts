import { describe, expect, it } from 'vitest';
import { changeDeviceKind, removedBy } from '../../../src/canvas/inspector/change-device-kind.ts';
import type { Design } from '../../../src/engine/model/design.ts';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { deviceKinds, type DeviceKind } from '../../../src/engine/model/devices.ts';
import { parseDesign } from '../../../src/engine/model/parse-design.ts';
import { pairDesign } from '../../support/designs.ts';

const changed = (design: Design, id: string, kind: DeviceKind): Design => {
  const operation = changeDeviceKind(design, id, kind);
  if (!operation.ok) throw new Error(operation.why);
  return applyPatch(design, operation.patch);
};

describe('changing the kind of a device', () => {
  it('gives a valid design from every kind to every other', () => {
    const design = pairDesign({ hub: 'ha-pair' });
    for (const id of ['fw-s0', 'fw-s1', 'sw-s0', 'h-s0-a'])
      for (const kind of deviceKinds)
        expect(parseDesign(changed(design, id, kind)), `${id} to ${kind}`).toMatchObject({ ok: true });
  });

  it('takes nothing away between firewall and router', () => {
    const design = applyPatch(pairDesign(), { devices: { 'fw-s1': { managementAddress: '10.9.0.12' } } });
    const operation = changeDeviceKind(design, 'fw-s1', 'router');
    expect(operation).toMatchObject({ ok: true, label: 'Make fw-s1 a router' });
    expect(operation.ok && removedBy(design, operation.patch)).toEqual([]);
    expect(changed(design, 'fw-s1', 'router').devices['fw-s1']).toEqual({
      ...design.devices['fw-s1'],
      kind: 'router',
    });
  });

  it('takes the overlay and the WAN ports away when a gateway becomes a switch, and says so', () => {
    const design = pairDesign();
    const operation = changeDeviceKind(design, 'fw-s1', 'switch');
    expect(operation.ok && removedBy(design, operation.patch)).toEqual([
      '1 cable or landing',
      '1 loopback endpoint',
      '1 IPsec association',
      '1 tunnel',
      '1 bridge or cross-connect',
    ]);
    const after = changed(design, 'fw-s1', 'switch');
    expect(Object.keys(after.devices['fw-s1']!.ports)).toEqual(['lan1', 'lan2']);
    expect(after.tunnels).toEqual({});
  });

  it('leaves of a pair what its first member had', () => {
    const design = pairDesign({ hub: 'ha-pair' });
    const after = changed(design, 'fw-s0', 'firewall');
    expect(after.devices['fw-s0']).not.toHaveProperty('memberNames');
    expect(Object.keys(after.devices['fw-s0']!.ports)).not.toContain('sync1');
    expect(after.links).not.toHaveProperty('cb-s0-sync1');
    expect(after.links).not.toHaveProperty('cb-s0-up2');
    expect(after.links['cb-s0-up1']).toEqual({
      kind: 'cable',
      a: { device: 'sw-s0', port: 'p1' },
      b: { device: 'fw-s0', port: 'lan1' },
    });
    expect(Object.keys(after.tunnels)).toEqual(Object.keys(design.tunnels));
  });

  it('gives a pair its members', () => {
    expect(changed(pairDesign(), 'fw-s1', 'ha-pair').devices['fw-s1']).toMatchObject({
      kind: 'ha-pair',
      memberNames: { 1: 'fw-s1-1', 2: 'fw-s1-2' },
      active: 1,
    });
  });

  it('refuses a device that is gone', () => {
    expect(changeDeviceKind(pairDesign(), 'fw-nowhere', 'router')).toMatchObject({ ok: false });
  });
});
