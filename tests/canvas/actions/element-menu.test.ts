import { describe, expect, it } from 'vitest';
import type { ElementActions } from '../../../src/canvas/actions/element-actions.ts';
import { elementMenu, type MenuFacts } from '../../../src/canvas/actions/element-menu.ts';
import { farEnds } from '../../../src/canvas/actions/far-ends.ts';
import { segmentsOf } from '../../../src/canvas/actions/segments-of.ts';
import { standingOf } from '../../../src/canvas/flow-changes-to-patch.ts';
import type { MenuAction, MenuItem } from '../../../src/components/menu.tsx';
import { route } from '../../../src/drawing/routing/route.ts';
import { tidy } from '../../../src/drawing/tidy/tidy.ts';
import { collections, type ElementRef } from '../../../src/engine/model/design.ts';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { hubDesign } from '../../support/designs.ts';

const plan = hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] });
const design = applyPatch(plan, tidy(plan));
const standing = standingOf(route(design));
const calls: (readonly [string, ...unknown[]])[] = [];
const act = new Proxy({} as ElementActions, {
  get:
    (_target, name: string) =>
    (...args: unknown[]) =>
      void calls.push([name, ...args]),
});
const facts = (more: Partial<MenuFacts> = {}): MenuFacts => ({
  design,
  standing,
  selection: [],
  editable: true,
  ...more,
});
const device = (id: string, port?: string): ElementRef => ({
  collection: 'devices',
  id,
  ...(port === undefined ? {} : { port }),
});
const actionsOf = (ref: ElementRef, more: Partial<MenuFacts> = {}): readonly MenuAction[] =>
  elementMenu({ ref }, facts(more), act).flatMap((group) => ('actions' in group ? group.actions : []));
const labels = (ref: ElementRef, more: Partial<MenuFacts> = {}): readonly string[] =>
  actionsOf(ref, more).map(({ label }) => label);
const choose = (actions: readonly MenuAction[], label: string): readonly unknown[] => {
  const items = actions.flatMap((action): readonly MenuItem[] =>
    'actions' in action ? action.actions : [action],
  );
  calls.length = 0;
  items.find((item) => item.label === label)!.onSelect();
  return calls[0]!;
};

describe('the menu of an element', () => {
  it('has something for every kind of element', () => {
    for (const collection of collections)
      for (const id of Object.keys(design[collection]).slice(0, 2))
        expect(labels({ collection, id }), `${collection}/${id}`).toContain('Open in the inspector');
  });

  it('is never empty of ways to look for who may only read, and changes nothing', () => {
    for (const collection of collections)
      for (const id of Object.keys(design[collection]).slice(0, 1)) {
        const words = labels({ collection, id }, { editable: false });
        expect(words).toContain('Show on the sheet');
        expect(
          words.filter((word) => /^(Remove|Rename|Add|Lock|Collapse|Tidy|Pin|Cable|Land)/.test(word)),
        ).toEqual([]);
      }
  });

  it('offers a gateway its cables, landings, tunnels, endpoints and notes', () => {
    expect(labels(device('fw-s1'))).toEqual(
      expect.arrayContaining([
        'Cable…',
        'Land…',
        'Tunnel to…',
        'Associate…',
        'Add an endpoint',
        'Pin a note here',
        'Rename',
        'Copy',
        'Duplicate',
        'Lock its place',
        'Follow',
        'Remove fw-s1',
      ]),
    );
  });

  it('locks and frees, collapses and opens, by what is so now', () => {
    const site: ElementRef = { collection: 'sites', id: 's1' };
    expect(choose(actionsOf(site), 'Collapse the site')).toEqual(['setCollapsed', ['s1'], true]);
    const closed = applyPatch(design, { layout: { sites: { s1: { collapsed: true, locked: true } } } });
    const words = labels(site, { design: closed });
    expect(words).toEqual(expect.arrayContaining(['Open the site', 'Free its place', 'Tidy this site']));
  });

  it('is about all that is selected where the element is among it', () => {
    const selection = ['h-s1-a', 'h-s1-b', 'sw-s1'].map((id) => device(id));
    const several = actionsOf(device('sw-s1'), { selection });
    expect(choose(several, 'Align left edges')).toEqual(['align', selection, 'left']);
    expect(choose(several, 'Space out evenly down')).toEqual(['spaceOut', selection, 'down']);
    expect(several.map(({ label }) => label)).toEqual(
      expect.arrayContaining(['Tidy these 3 devices', 'Remove 3 elements']),
    );
    expect(several.map(({ label }) => label)).not.toContain('Rename');
    expect(labels(device('fw-s2'), { selection })).toContain('Remove fw-s2');
  });

  it('holds what the page’s features add, for one element alone', () => {
    const extra = (ref: ElementRef) =>
      ref.id === 'h-s1-a' ? [{ label: 'Trace from here', onSelect: () => undefined }] : [];
    expect(labels(device('h-s1-a'), { extra })).toContain('Trace from here');
    expect(labels(device('h-s1-b'), { extra })).not.toContain('Trace from here');
    const selection = [device('h-s1-a'), device('h-s1-b')];
    expect(labels(device('h-s1-a'), { extra, selection })).not.toContain('Trace from here');
  });
});

describe('where one gets from an element', () => {
  const [tunnelId, tunnel] = Object.entries(design.tunnels)[0]!;

  it('is both ends of a tunnel, an association and a cable', () => {
    expect(farEnds(design, { collection: 'tunnels', id: tunnelId }).map(({ at }) => at.id)).toEqual([
      tunnel.a.endpoint,
      tunnel.b.endpoint,
    ]);
    const [association, { a, b }] = Object.entries(design.associations)[0]!;
    expect(farEnds(design, { collection: 'associations', id: association }).map(({ at }) => at.id)).toEqual([
      a.device,
      b.device,
    ]);
    const [landing, link] = Object.entries(design.links).find(([, each]) => each.kind === 'landing')!;
    expect(farEnds(design, { collection: 'links', id: landing })[1]!.at).toEqual({
      collection: 'transports',
      id: link.kind === 'landing' ? link.transport : '',
    });
  });

  it('is the other end of every tunnel at an endpoint, and of the cable in a port', () => {
    const ends = farEnds(design, { collection: 'endpoints', id: tunnel.a.endpoint });
    const own = Object.values(design.tunnels).filter(
      ({ a, b }) => a.endpoint === tunnel.a.endpoint || b.endpoint === tunnel.a.endpoint,
    );
    expect(ends).toHaveLength(own.length);
    expect(ends.every(({ at }) => at.collection === 'endpoints' && at.id !== tunnel.a.endpoint)).toBe(true);
    const [port] = Object.keys(design.devices['h-s1-a']!.ports);
    const [far] = farEnds(design, device('h-s1-a', port));
    expect(far!.at).toMatchObject({ collection: 'devices', id: 'sw-s1' });
    expect(far!.words).toMatch(/^to sw-s1 /);
  });

  it('leads from a pair to no member of itself', () => {
    for (const { at } of farEnds(design, device('fw-s0'))) expect(at.id).not.toBe('fw-s0');
  });

  it('is nowhere from what nothing leads on from', () => {
    expect(farEnds(design, { collection: 'segments', id: Object.keys(design.segments)[0]! })).toEqual([]);
  });
});

it('segments are known of tunnels, endpoints, hosts, sites and themselves', () => {
  const [segment] = Object.keys(design.segments);
  const host = Object.entries(design.devices).find(
    ([, each]) => each.kind === 'host' && each.segment === segment,
  )![0];
  expect(segmentsOf(design, device(host))).toEqual([segment]);
  expect(segmentsOf(design, { collection: 'segments', id: segment! })).toEqual([segment]);
  expect(segmentsOf(design, { collection: 'sites', id: 's1' })).toEqual(Object.keys(design.segments).sort());
  const [tunnel, { a }] = Object.entries(design.tunnels)[0]!;
  const carried = segmentsOf(design, { collection: 'tunnels', id: tunnel });
  expect(carried).toHaveLength(1);
  expect(segmentsOf(design, { collection: 'endpoints', id: a.endpoint })).toEqual(
    expect.arrayContaining([...carried]),
  );
  expect(segmentsOf(design, device('sw-s1'))).toEqual([]);
});
