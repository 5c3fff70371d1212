import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { emptyDesign } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import type { MergePatch } from '#engine/model/merge-patch.ts';
import { route } from '#drawing/routing/route.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { hubDesign, sitesOnCoast } from '../../support/designs.ts';
import { misplacedFrames, overPlates, throughSolid } from '../routing/sheet-checks.ts';

const changed = (design: Design, patch: unknown): Design => applyPatch(design, patch as MergePatch);
const blank = emptyDesign('A blank sheet');

const designs: { readonly [name: string]: Design } = {
  'a blank sheet': blank,
  'one site with nothing in it': changed(blank, { sites: { gul: { name: 'Gullhaven' } } }),
  'a transport that nobody uses': changed(blank, {
    transports: { t: { name: 'Coastal access', kind: 'internet' } },
  }),
  'a host alone in its site': changed(blank, {
    sites: { gul: { name: 'Gullhaven' } },
    devices: { h: { kind: 'host', site: 'gul', name: 'gate-gul', ports: {} } },
  }),
  'sites that nothing joins yet': sitesOnCoast(5).build(),
  'joined sites without their transport': changed(hubDesign(3), { transports: { coast: null } }),
  'three transports': changed(hubDesign(4), {
    transports: {
      ring: { name: 'Harbour ring', kind: 'own-routed', trusted: true },
      lease: { name: 'Leased net', kind: 'private-routed' },
    },
    links: {
      'ld-x': { kind: 'landing', device: 'fw-s1', port: 'lan2', transport: 'ring' },
      'ld-y': { kind: 'landing', device: 'fw-s2', port: 'lan2', transport: 'lease' },
    },
  }),
};

describe.each(Object.entries(designs))('%s', (_name, design) => {
  const tidied = applyPatch(design, tidy(design));
  const geometry = route(tidied);

  it('gets a sheet on which nothing is in the way', () => {
    expect(misplacedFrames(geometry)).toEqual([]);
    expect([...overPlates(geometry), ...throughSolid(geometry)]).toEqual([]);
    expect(geometry.crowded).toEqual([]);
  });
  it('shows every site and transport, and stays when tidied again', () => {
    expect(geometry.sites.map((site) => site.id)).toEqual(Object.keys(design.sites).sort());
    expect(geometry.bands.map((band) => band.id)).toEqual(Object.keys(design.transports).sort());
    expect(tidy(tidied)).toEqual({});
  });
});
