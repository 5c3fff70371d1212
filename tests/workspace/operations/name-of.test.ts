import { expect, it } from 'vitest';
import { emptyDesign } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { nameOf } from '../../../src/workspace/operations/name-of.ts';

const design = applyPatch(emptyDesign('Names'), {
  sites: { gul: { name: 'Gullhaven' } },
  devices: { cam: { kind: 'host', name: 'cam-ske', ports: {} } },
  segments: { c: { name: 'CCTV', letter: 'C', sites: {} } },
  demands: {
    named: { name: 'Camera pictures', segment: 'c', from: { host: 'cam' }, to: { site: 'gul' } },
    plain: { segment: 'c', from: { host: 'cam' }, to: { site: 'gul' } },
  },
});

it('calls a demand by its name, or else by where it leads, never by its id', () => {
  expect(nameOf(design, { collection: 'demands', id: 'named' })).toBe('Camera pictures');
  expect(nameOf(design, { collection: 'demands', id: 'plain' })).toBe('cam-ske to all of Gullhaven');
});
