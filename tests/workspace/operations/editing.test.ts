import { describe, expect, it } from 'vitest';
import type { Design, ElementRef } from '../../../src/engine/model/design.ts';
import { emptyDesign } from '../../../src/engine/model/design.ts';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import type { NumberingContext } from '../../../src/engine/numbering/numbering-context.ts';
import { parseDesign } from '../../../src/engine/model/parse-design.ts';
import { danglingPatch } from '../../../src/engine/model/references.ts';
import { landPort, pullCable } from '../../../src/workspace/operations/connect-ports.ts';
import { copyParts, pasteParts, readParts } from '../../../src/workspace/operations/copy-parts.ts';
import {
  freeLetter,
  freeLoopback,
  freeName,
  freeVlan,
  freeVni,
} from '../../../src/workspace/operations/free-names.ts';
import {
  associationsBetween,
  joinEndpoints,
  likelyTransport,
  mayGoBare,
} from '../../../src/workspace/operations/join-endpoints.ts';
import type { Standing } from '../../../src/workspace/operations/move-parts.ts';
import {
  dockEndpoint,
  moveElements,
  moveEndpointTo,
  rehome,
  setLocked,
} from '../../../src/workspace/operations/move-parts.ts';
import type { NewId, Operation } from '../../../src/workspace/operations/operation.ts';
import {
  placeDevice,
  placeEndpoint,
  placeNote,
  placeSegment,
  placeSite,
  placeTransport,
} from '../../../src/workspace/operations/place-parts.ts';
import { removeElements } from '../../../src/workspace/operations/remove-parts.ts';
import { meshDesign, pairDesign } from '../../support/designs.ts';

const counter = (): NewId => {
  let n = 0;
  return (prefix) => `${prefix}-x${(n += 1)}`;
};
/** Does an operation as a commit would, and insists on a valid design. */
const done = (design: Design, operation: Operation): Design => {
  if (!operation.ok) throw new Error(operation.why);
  const after = applyPatch(design, operation.patch);
  const whole = applyPatch(after, danglingPatch(after));
  expect(parseDesign(whole)).toMatchObject({ ok: true });
  return whole;
};
const why = (operation: Operation): string => (operation.ok ? '' : operation.why);
const created = (operation: Operation): ElementRef => {
  if (!operation.ok || operation.created?.[0] === undefined) throw new Error('Nothing was made.');
  return operation.created[0];
};

describe('drawing a two-site overlay from nothing', () => {
  it('ends with a valid design that has a tunnel in both bridges', () => {
    const newId = counter();
    let design = emptyDesign('By hand');
    const step = (operation: Operation): string => {
      design = done(design, operation);
      return operation.ok && operation.created !== undefined ? created(operation).id : '';
    };
    const coast = step(placeTransport(design, { x: 640, y: 300 }, { top: 30, bottom: 763 }, newId));
    const here = step(placeSite(design, { x: 60, y: 200 }, newId));
    const there = step(placeSite(design, { x: 800, y: 200 }, newId));
    const pair = step(placeDevice(design, 'ha-pair', { x: 100, y: 240 }, here, newId));
    const wall = step(placeDevice(design, 'firewall', { x: 900, y: 240 }, there, newId));
    const segment = step(placeSegment(design, newId));
    for (const gateway of [pair, wall]) {
      const sw = step(
        placeDevice(design, 'switch', { x: 100, y: 400 }, design.devices[gateway]!.site, newId),
      );
      const host = step(placeDevice(design, 'host', { x: 60, y: 400 }, design.devices[gateway]!.site, newId));
      design = done(design, { ok: true, label: '', patch: { devices: { [host]: { segment } } } });
      step(pullCable(design, { device: sw }, { device: gateway, member: 1 }, newId));
      step(pullCable(design, { device: host }, { device: sw }, newId));
      step(landPort(design, { device: gateway }, coast, newId));
      const access = Object.values(design.devices[sw]!.ports).filter((port) => port.vlan === 110);
      expect(access).toHaveLength(1);
    }
    const a = step(placeEndpoint(design, pair, newId));
    const b = step(placeEndpoint(design, wall, newId));
    expect(likelyTransport(design, a, b)).toBe(coast);
    expect(mayGoBare(design, coast)).toBe(false);
    const tunnel = step(
      joinEndpoints(design, { a, b, vni: freeVni(design, {}), association: 'new', segment }, newId),
    );
    expect(design.tunnels[tunnel]).toMatchObject({
      a: { vni: 10_001, udpPort: 4789 },
      b: { vni: 10_001 },
      family: 4,
    });
    const bridges = Object.values(design.forwarders);
    expect(bridges).toHaveLength(2);
    for (const bridge of bridges)
      expect(
        Object.values(bridge.circuits)
          .map((circuit) => circuit.kind)
          .sort(),
      ).toEqual(['port', 'tunnel']);
    const association = Object.values(design.associations)[0]!;
    expect(Object.values(association.a.selectors!)[0]).toMatchObject({
      local: '10.255.0.1/32',
      remote: '10.255.0.2/32',
    });
    expect([association.a.start, association.b.start]).toEqual(['starts', 'answers']);
  });
});

describe('a refused connection says why', () => {
  const design = pairDesign();
  const newId = counter();
  it.each<[string, Operation, RegExp]>([
    [
      'a used port',
      pullCable(design, { device: 'h-s0-a', port: 'p1' }, { device: 'sw-s0' }, newId),
      /h-s0-a, port 1 already holds a cable/,
    ],
    [
      'two hosts',
      pullCable(design, { device: 'h-s0-a' }, { device: 'h-s1-a' }, newId),
      /switch between them/,
    ],
    [
      'a device with itself',
      pullCable(design, { device: 'sw-s0' }, { device: 'sw-s0' }, newId),
      /close a loop/,
    ],
    [
      'a WAN port in a cable',
      pullCable(design, { device: 'fw-s0', port: 'wan1' }, { device: 'sw-s0' }, newId),
      /already holds a cable/,
    ],
    ['a switch on a transport', landPort(design, { device: 'sw-s0' }, 'coast', newId), /does not land/],
    [
      'a LAN port on a transport',
      landPort(design, { device: 'fw-s0', port: 'lan2' }, 'coast', newId),
      /only WAN ports land/,
    ],
    [
      'a gateway without a free WAN port',
      landPort(design, { device: 'fw-s0' }, 'coast', newId),
      /no free WAN port/,
    ],
    [
      'a ring with itself',
      joinEndpoints(design, { a: 'lo-s0', b: 'lo-s0', vni: 5, association: 'none' }, newId),
      /two different/,
    ],
    ['an endpoint on a switch', placeEndpoint(design, 'sw-s0', newId), /firewall, an HA pair or a router/],
    ['a ring docked on a host', moveEndpointTo(design, 'lo-s0', 'h-s0-a'), /docks on a firewall/],
    [
      'a foreign association',
      joinEndpoints(meshDesign(3), { a: 'lo-s0', b: 'lo-s1', vni: 5, association: 'as-s0-s2' }, newId),
      /does not join these two/,
    ],
  ])('%s', (_what, operation, reason) => {
    expect(why(operation)).toMatch(reason);
  });

  it('and adds a port to a device that has none free', () => {
    const after = done(design, pullCable(design, { device: 'sw-s0' }, { device: 'sw-s1' }, newId));
    expect(Object.keys(after.devices['sw-s0']!.ports)).toHaveLength(3);
    expect(
      Object.values(after.links).filter(
        (link) => link.kind === 'cable' && link.a.device === 'sw-s0' && link.b.device === 'sw-s1',
      ),
    ).toHaveLength(1);
  });
});

describe('a host plugged into a gateway', () => {
  it("gets a place in its segment's bridge, untagged", () => {
    const design = pairDesign();
    const loose = done(design, removeElements(design, [{ collection: 'links', id: 'cb-h-s0-a' }]));
    const after = done(
      loose,
      pullCable(loose, { device: 'h-s0-a' }, { device: 'fw-s0', port: 'lan2' }, counter()),
    );
    expect(after.forwarders['br-s0-a']!.circuits['host-lan2']).toMatchObject({
      kind: 'port',
      port: 'lan2',
      vlans: 'untagged',
    });
    expect(after.devices['fw-s0']!.ports.lan2).toMatchObject({ mode: 'access' });
  });
});

describe('numbers and names offered', () => {
  const design = meshDesign(3);
  it('are the lowest that are free', () => {
    expect(freeVni(design, {})).toBe(10_003);
    expect(freeLoopback(design, {})).toBe('10.255.0.4/32');
    expect(freeLetter(design)).toBe('B');
    expect(freeVlan(design, {})).toBe(120);
    expect(freeName(design.devices, 'fw')).toBe('fw-1');
    expect(freeName(design.devices, 'fw-s0', false)).toBe('fw-s0-2');
  });

  it('keep a loopback out of every segment', () => {
    const taken = applyPatch(design, { segments: { a: { sites: { s0: { subnets: ['10.255.0.0/24'] } } } } });
    expect(freeLoopback(taken, {})).toBe('10.255.1.1/32');
  });

  const known: NumberingContext = {
    pools: {
      vnis: [{ from: 20_001, to: 20_002 }],
      vlans: [{ from: 300, to: 304 }],
      loopbacks: ['172.20.0.0/29'],
    },
    otherDesigns: [{ vnis: [20_001, 10_003], loopbacks: ['172.20.0.1'], tunnelNames: ['tn-fw-s0-fw-s1-a'] }],
  };
  it('come from the pools and from nothing that another design holds', () => {
    expect(freeVni(design, known)).toBe(20_002);
    expect(freeLoopback(design, known)).toBe('172.20.0.2/32');
    expect(freeVlan(design, known)).toBe(300);
    const taken = applyPatch(design, { segments: { a: { sites: { s0: { vlan: 300 } } } } });
    expect(freeVlan(taken, known)).toBe(301);
  });

  it('are beyond the pools once these are used up, and still of no other design', () => {
    const usedUp = { ...known, pools: { ...known.pools, vnis: [{ from: 20_001, to: 20_001 }] } };
    expect(freeVni(design, usedUp)).toBe(10_004);
  });

  it('name a tunnel, a copy and an endpoint as no other design does', () => {
    const bare = done(design, removeElements(design, [{ collection: 'tunnels', id: 'tn-s0-s1' }]));
    const joined = done(
      bare,
      joinEndpoints(
        bare,
        { a: 'lo-s0', b: 'lo-s1', vni: 5, association: 'as-s0-s1', segment: 'a' },
        counter(),
        known,
      ),
    );
    expect(joined.tunnels['tn-x1']!.name).toBe('tn-fw-s0-fw-s1-a-2');
    const placed = done(design, placeEndpoint(design, 'fw-s0', counter(), known));
    expect(placed.endpoints['lo-x1']!.ipv4).toBe('172.20.0.2/32');
    const parts = copyParts(design, standing, [{ collection: 'sites', id: 's0' }])!;
    const pasted = done(design, pasteParts(design, parts, { dx: 0, dy: 0 }, undefined, counter(), known));
    expect(Object.values(pasted.endpoints).map(({ ipv4 }) => ipv4)).toContain('172.20.0.2/32');
  });

  it('go on after Z', () => {
    let many = emptyDesign('Many');
    for (let i = 0; i < 27; i += 1) many = done(many, placeSegment(many, counter2));
    expect(Object.values(many.segments).map((segment) => segment.letter)).toContain('AA');
  });
  const counter2 = counter();
});

describe('a tunnel that carries a segment which lands nowhere yet', () => {
  it('lets it land at both sites, on one VLAN', () => {
    const design = pairDesign();
    const nowhere = done(
      design,
      placeSegment(emptyOfSites(design), () => 'seg-b'),
    );
    const after = done(
      nowhere,
      joinEndpoints(
        nowhere,
        { a: 'lo-s0', b: 'lo-s1', vni: 77, association: 'as-s0-s1', segment: 'seg-b' },
        counter(),
      ),
    );
    expect(after.segments['seg-b']!.sites).toEqual({ s0: { vlan: 120 }, s1: { vlan: 120 } });
  });
  /** The same design to an operation that looks for sites and finds none. */
  const emptyOfSites = (design: Design): Design => ({ ...design, sites: {} });
});

describe('a tunnel pulled into an isolated mesh', () => {
  it('joins the isolation group of its neighbours', () => {
    const design = meshDesign(3, { join: { isolation: 'overlay' } });
    const after = done(
      design,
      joinEndpoints(
        design,
        {
          a: 'lo-s0',
          b: 'lo-s1',
          vni: 77,
          association: associationsBetween(design, 'lo-s0', 'lo-s1')[0]!,
          segment: 'a',
        },
        counter(),
      ),
    );
    expect(after.forwarders['br-s0-a']!.circuits['tn-x1']).toMatchObject({ isolation: 'overlay' });
  });
});

const standing: Standing = {
  devices: { 'fw-s0': { x: 10, y: 20 }, 'sw-s0': { x: 10, y: 120 }, 'h-s0-a': { x: 0, y: 220 } },
  sites: { s0: { x: 0, y: 0, width: 300, height: 300 } },
  notes: {},
};

describe('moving', () => {
  const design = pairDesign();
  it('takes a site and its devices along as one step', () => {
    const refs: ElementRef[] = [
      { collection: 'sites', id: 's0' },
      { collection: 'devices', id: 'fw-s0' },
    ];
    const after = done(design, moveElements(design, standing, refs, 5, 7));
    expect(after.layout.sites!.s0).toMatchObject({ x: 5, y: 7 });
    expect(after.layout.devices).toEqual({
      'fw-s0': { x: 15, y: 27 },
      'sw-s0': { x: 15, y: 127 },
      'h-s0-a': { x: 5, y: 227 },
    });
  });

  it('leaves what is locked where it is', () => {
    const locked = done(design, setLocked(design, standing, [{ collection: 'devices', id: 'fw-s0' }], true));
    expect(locked.layout.devices!['fw-s0']).toEqual({ x: 10, y: 20, locked: true });
    expect(moveElements(locked, standing, [{ collection: 'devices', id: 'fw-s0' }], 5, 5)).toMatchObject({
      patch: {},
    });
    const freed = done(locked, setLocked(locked, standing, [{ collection: 'devices', id: 'fw-s0' }], false));
    expect(freed.layout.devices!['fw-s0']).toEqual({ x: 10, y: 20 });
  });

  it('moves an upright band across only', () => {
    const banded = applyPatch(design, {
      layout: { transports: { coast: { limbs: [{ x: 600, y: 30, width: 122, height: 700 }] } } },
    });
    const after = done(
      banded,
      moveElements(banded, standing, [{ collection: 'transports', id: 'coast' }], 20, 50),
    );
    expect(after.layout.transports!.coast!.limbs[0]).toEqual({ x: 620, y: 30, width: 122, height: 700 });
  });

  it('puts a dropped device into the site whose frame it is in, and docks rings', () => {
    expect(
      done(design, { ok: true, label: '', patch: rehome(design, 'h-s0-a', 's1') }).devices['h-s0-a']!.site,
    ).toBe('s1');
    expect(done(design, dockEndpoint(design, 'lo-s0', 'left')).layout.endpoints!['lo-s0']).toEqual({
      side: 'left',
    });
    expect(done(design, moveEndpointTo(design, 'lo-s0', 'fw-s1')).endpoints['lo-s0']!.device).toBe('fw-s1');
  });
});

describe('removing', () => {
  it('takes an association together with its tunnels and their circuits', () => {
    const design = pairDesign({ segments: ['a', 'b'] });
    const after = done(design, removeElements(design, [{ collection: 'associations', id: 'as-s0-s1' }]));
    expect(after.tunnels).toEqual({});
    expect(Object.keys(after.forwarders['br-s0-a']!.circuits)).toEqual(['access']);
  });

  it('can remove one port with its cable', () => {
    const design = pairDesign();
    const after = done(design, removeElements(design, [{ collection: 'devices', id: 'sw-s0', port: 'p2' }]));
    expect(after.links['cb-h-s0-a']).toBeUndefined();
  });
});

describe('copying', () => {
  const design = pairDesign();
  it('pastes whole sites with ids, names, addresses and VNIs of their own', () => {
    const parts = copyParts(design, standing, [
      { collection: 'sites', id: 's0' },
      { collection: 'sites', id: 's1' },
    ])!;
    const again = readParts(JSON.stringify(parts))!;
    expect(again).toEqual(parts);
    const after = done(design, pasteParts(design, again, { dx: 40, dy: 40 }, undefined, counter()));
    expect(Object.keys(after.devices)).toHaveLength(12);
    expect(Object.keys(after.tunnels)).toHaveLength(2);
    const vnis = Object.values(after.tunnels).map((tunnel) => tunnel.a.vni);
    expect(new Set(vnis).size).toBe(2);
    const addresses = Object.values(after.endpoints).map((endpoint) => endpoint.ipv4);
    expect(new Set(addresses).size).toBe(4);
    const names = Object.values(after.devices).map((device) => device.name);
    expect(new Set(names).size).toBe(12);
    expect(new Set(Object.values(after.layout.devices!).map((place) => `${place.x},${place.y}`)).size).toBe(
      3,
    );
  });

  it('pastes into another design and leaves out what that one lacks', () => {
    const parts = copyParts(design, standing, [{ collection: 'sites', id: 's0' }])!;
    const other = emptyDesign('Other');
    const after = done(other, pasteParts(other, parts, { dx: 0, dy: 0 }, undefined, counter()));
    expect(Object.values(after.links).every((link) => link.kind === 'cable')).toBe(true);
    expect(
      Object.values(after.devices).every((device) => device.kind !== 'host' || device.segment === undefined),
    ).toBe(true);
  });

  it('asks for a site when devices alone would have none', () => {
    const parts = copyParts(design, standing, [{ collection: 'devices', id: 'sw-s0' }])!;
    expect(why(pasteParts(emptyDesign('Other'), parts, { dx: 0, dy: 0 }, undefined, counter()))).toMatch(
      /select a site/,
    );
    const into = done(design, pasteParts(design, parts, { dx: 0, dy: 0 }, 's1', counter()));
    expect(
      Object.values(into.devices).filter((device) => device.site === 's1' && device.kind === 'switch'),
    ).toHaveLength(2);
  });

  it('reads nothing else as parts', () => {
    expect(readParts('{"format":"longpatch.design/1"}')).toBeUndefined();
    expect(readParts('hello')).toBeUndefined();
    expect(copyParts(design, standing, [{ collection: 'segments', id: 'a' }])).toBeUndefined();
  });
});

describe('notes', () => {
  it('stand where they were put', () => {
    const design = done(emptyDesign('Notes'), placeNote({ x: 4, y: 5 }, counter()));
    expect(design.layout.notes).toEqual({ 'note-x1': { x: 4, y: 5 } });
  });
});
