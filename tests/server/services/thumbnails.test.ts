import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { pairDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  signIn,
  startTestApplication,
} from '../../support/test-application.ts';

let application: TestApplication;
let architect: TestBrowser;
let designId: string;

beforeAll(async () => {
  application = await startTestApplication();
  const workspace = await addWorkspace(application);
  architect = await signIn(application, workspace.people.architect);
  designId = await addDesign(application, await addEngagement(application, workspace.id), pairDesign());
});
afterAll(() => application.close());

const get = (query: string) => architect.get(`/api/designs/${designId}/thumbnail${query}`);
const textOf = (response: { readonly body: unknown }): string => (response.body as Buffer).toString('utf8');

describe('a thumbnail', () => {
  test('is a picture in the theme asked for, kept by the browser under its sequence number', async () => {
    const paper = await get('?v=0&theme=paper').expect(200);
    expect(paper.headers['content-type']).toBe('image/svg+xml; charset=utf-8');
    expect(paper.headers['cache-control']).toBe('private, max-age=86400');
    expect(paper.headers['content-security-policy']).toContain('sandbox');
    expect(textOf(paper)).toMatch(/^<svg .*<\/svg>\s*$/s);
    const slate = await get('?v=0&theme=slate').expect(200);
    expect(textOf(slate)).not.toBe(textOf(paper));
    expect(slate.headers['etag']).not.toBe(paper.headers['etag']);
  });

  test('is not sent again to a browser that has it', async () => {
    const first = await get('?theme=paper').expect(200);
    expect(first.headers['cache-control']).toBe('private, no-cache');
    await get('?theme=paper').set('If-None-Match', first.headers['etag']!).expect(304);
  });

  test('changes with the design, and shows its faults', async () => {
    const before = await get('?v=0').expect(200);
    await architect
      .post(`/api/designs/${designId}/patches`, {
        baseSequence: 0,
        edits: [{ editId: crypto.randomUUID(), patch: { tunnels: { 'tn-s0-s1-a': { b: { vni: 77 } } } } }],
      })
      .expect(200);
    const after = await get('?v=1').expect(200);
    expect(textOf(after)).not.toBe(textOf(before));
    const stale = await get('?v=0').expect(200);
    expect(textOf(stale)).toBe(textOf(after));
    expect(stale.headers['cache-control']).toBe('private, no-cache');
    await get('?v=1').set('If-None-Match', before.headers['etag']!).expect(200);
  });

  test.each(['?theme=print', '?v=x', '?v=-1', '?size=9'])('is refused with %s', async (query) => {
    await get(query).expect(400);
  });
});
