import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { emptyDesign } from '#engine/model/design.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { applyPatch, patchAt } from '#engine/model/merge-patch.ts';
import { changedProblems, parseDesign, parseEntry } from '#engine/model/parse-design.ts';
import { upgradeDesign } from '#engine/model/versions.ts';
import { hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';

const problemsAfter = (design: Design, patch: MergePatch) => {
  const parsed = parseDesign(applyPatch(design, patch));
  return parsed.ok ? [] : parsed.problems;
};

describe('reading a design', () => {
  it.each([
    ['an empty one', emptyDesign('Nothing yet')],
    ['a pair of sites', pairDesign()],
    ['a hub with an HA pair', hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] })],
    ['a mesh', meshDesign(4)],
  ])('takes %s as it is', (_what, design) => {
    const parsed = parseDesign(JSON.parse(JSON.stringify(design)));
    expect(parsed).toEqual({ ok: true, value: design });
  });

  it.each<[string, readonly string[], unknown, RegExp]>([
    ['a VLAN of 4095', ['segments', 'a', 'sites', 's0', 'vlan'], 4095, /1 to 4094/],
    ['a VLAN of 0', ['devices', 'sw-s0', 'ports', 'p1', 'nativeVlan'], 0, /1 to 4094/],
    ['a VNI of 2^24', ['tunnels', 'tn-s0-s1-a', 'a', 'vni'], 16_777_216, /16777215/],
    ['half a byte of MTU', ['transports', 'coast', 'mtu'], 1500.5, /expected/],
    ['a loopback without prefix length', ['endpoints', 'lo-s0', 'ipv4'], '10.255.0.1', /prefix length/],
    ['an address that is none', ['links', 'ld-s0-coast', 'ipv4'], '198.51.100.300', /IPv4 address/],
    ['an IPv4 address of one number', ['links', 'ld-s0-coast', 'ipv4'], '3325256704', /IPv4 address/],
    ['a kind that does not exist', ['devices', 'fw-s0', 'kind'], 'toaster', /firewall/],
    ['a field that does not exist', ['tunnels', 'tn-s0-s1-a', 'segment'], 'a', /no field called segment/],
    [
      'a secret where its vault name belongs',
      ['associations', 'as-s0-s1', 'a', 'authentication', 'preSharedKey'],
      'hunter2',
      /no field called preSharedKey/,
    ],
    ['two lines as a name', ['sites', 's0', 'name'], 'Head\noffice', /one line/],
    ['an id with a space', ['sites', 'new site'], { name: 'New' }, /a-z, 0-9/],
    ['a device at no site', ['devices', 'fw-s0', 'site'], 'nowhere', /an id that exists in sites/],
    ['a cable to no port', ['links', 'cb-s0-up1', 'b', 'port'], 'lan9', /a port of a device/],
  ])('refuses %s and says where', (_what, path, value, expected) => {
    const problems = problemsAfter(pairDesign(), patchAt(path, value));
    const problem = problems.find((p) => expected.test(p.expected));
    expect(problem, JSON.stringify(problems)).toBeDefined();
    expect(path.join('.').startsWith(problem!.path) || problem!.path.startsWith(path.join('.'))).toBe(true);
  });

  it('collects every problem, not only the first', () => {
    const patch = {
      sites: { s0: { name: '' } },
      transports: { coast: { mtu: 5 } },
      tunnels: { 'tn-s0-s1-a': { a: { udpPort: 0 } } },
    };
    expect(problemsAfter(pairDesign(), patch).map((p) => p.path)).toEqual([
      'sites.s0.name',
      'transports.coast.mtu',
      'tunnels.tn-s0-s1-a.a.udpPort',
    ]);
  });

  it.each([[null], [7], ['text'], [[]], [{}], [{ format: 'longpatch.design/99' }]])(
    'refuses %j, which is no design',
    (input) => {
      const parsed = parseDesign(input);
      expect(parsed.ok).toBe(false);
      if (!parsed.ok) expect(parsed.problems[0]!.path).toBe('format');
    },
  );

  it('brings an older document up to date by the steps for its version', () => {
    const steps = {
      'longpatch.design/0': (old: { readonly [key: string]: unknown }) => ({
        ...old,
        format: 'longpatch.design/1',
      }),
    };
    expect(upgradeDesign({ ...emptyDesign('Old'), format: 'longpatch.design/0' }, steps)).toEqual({
      ok: true,
      value: emptyDesign('Old'),
    });
  });

  it('checks a single entry for a form', () => {
    expect(parseEntry('sites', 's9', { name: 'Ninth' })).toEqual([]);
    expect(parseEntry('sites', 's9', { name: ' ' })[0]).toMatchObject({
      path: 'sites.s9.name',
      expected: expect.stringContaining('name'),
    });
  });
});

describe('checking what a patch changed', () => {
  const before = pairDesign();
  it.each<[string, MergePatch, readonly string[]]>([
    ['nothing', { transports: { coast: { mtu: 1492 } } }, []],
    ['the field', { transports: { coast: { mtu: 1 } } }, ['transports.coast.mtu']],
    ['a missing field', { transports: { coast: { kind: null } } }, ['transports.coast.kind']],
    ['a bad id', { sites: { 'Bad id': { name: 'x' } } }, ['sites.Bad id']],
    ['a collection that is no map', { sites: [] as never }, ['sites']],
    ['a removed collection', { sites: null }, ['sites']],
    ['a field the document has no place for', { extra: 1 }, ['extra']],
    ['another format', { format: 'other' }, ['format']],
    ['the layout', { layout: { devices: { 'fw-s0': { x: 'left', y: 0 } } } }, ['layout.devices.fw-s0.x']],
  ])('names %s', (_what, patch, paths) => {
    expect(changedProblems(before, applyPatch(before, patch)).map((p) => p.path)).toEqual(paths);
  });
});
