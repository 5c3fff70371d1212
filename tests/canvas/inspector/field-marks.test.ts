import { describe, expect, it } from 'vitest';
import {
  findingsAbout,
  markAt,
  markWithin,
  pathOfProperty,
} from '../../../src/canvas/inspector/field-marks.ts';
import type { Finding } from '../../../src/engine/rules/finding.ts';

const finding = (key: string, values: Partial<Finding>): Finding => ({
  key,
  rule: 'a-rule',
  severity: 'blocking',
  sentence: key,
  words: key,
  why: '',
  seen: '',
  sources: [],
  elements: [],
  properties: [],
  values: {},
  fingerprint: '',
  ...values,
});
const tunnel = { collection: 'tunnels', id: 'tn' } as const;
const port = { collection: 'devices', id: 'sw', port: 'p1' } as const;

describe('the marks of fields', () => {
  it('finds a port’s field whether the port is in the reference or in the path', () => {
    const path = ['devices', 'sw', 'ports', 'p1', 'vlan'];
    expect(pathOfProperty({ ref: port, path: ['vlan'] })).toEqual(path);
    expect(pathOfProperty({ ref: port, path: ['ports', 'p1', 'vlan'] })).toEqual(path);
    expect(
      pathOfProperty({ ref: { collection: 'devices', id: 'sw' }, path: ['ports', 'p1', 'vlan'] }),
    ).toEqual(path);
  });

  it('shows the most severe of several findings at one field', () => {
    const findings = [
      finding('first', { properties: [{ ref: tunnel, path: ['a', 'vni'] }] }),
      finding('second', { severity: 'advisory', properties: [{ ref: tunnel, path: ['a', 'vni'] }] }),
    ];
    expect(markAt(findings, ['tunnels', 'tn', 'a', 'vni'])).toEqual({
      severity: 'blocking',
      sentence: 'first',
    });
    expect(markAt(findings, ['tunnels', 'tn', 'b', 'vni'])).toBeUndefined();
  });

  it('knows that something within a part is marked, and takes no longer name for it', () => {
    const findings = [finding('via', { properties: [{ ref: tunnel, path: ['a', 'via', 'x'] }] })];
    expect(markWithin(findings, ['tunnels', 'tn', 'a'])).toMatchObject({ sentence: 'via' });
    expect(markWithin(findings, ['tunnels', 'tn', 'a', 'vi'])).toBeUndefined();
  });

  it('lists the findings of an element, those about its own fields first within a severity', () => {
    const findings = [
      finding('elsewhere', { elements: [{ collection: 'sites', id: 's' }] }),
      finding('names it', { elements: [tunnel] }),
      finding('its field', { elements: [tunnel], properties: [{ ref: tunnel, path: ['a', 'vni'] }] }),
      finding('mild', { severity: 'advisory', properties: [{ ref: tunnel, path: ['b', 'vni'] }] }),
    ];
    expect(findingsAbout(findings, tunnel).map(({ key }) => key)).toEqual(['its field', 'names it', 'mild']);
  });

  it('keeps the findings of a port apart from those of its device', () => {
    const device = { collection: 'devices', id: 'sw' } as const;
    const findings = [
      finding('device', { elements: [device] }),
      finding('port', { elements: [port] }),
      finding('field', { elements: [device], properties: [{ ref: device, path: ['ports', 'p1', 'vlan'] }] }),
    ];
    expect(findingsAbout(findings, port).map(({ key }) => key)).toEqual(['field', 'port']);
    expect(findingsAbout(findings, device)).toHaveLength(3);
  });
});
