import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { tidy } from '#drawing/tidy/tidy.ts';
import { demoDesign } from '../../../seeds/demo-designs/demo-design.ts';
import { hubDesign } from '../../support/designs.ts';
import type { TestApplication, TestBrowser, TestWorkspace } from '../../support/test-application.ts';
import {
  addDesign,
  addEngagement,
  addWorkspace,
  signIn,
  startTestApplication,
} from '../../support/test-application.ts';

let application: TestApplication;
let workspace: TestWorkspace;
let presales: TestBrowser;
let designId: string;

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
  presales = await signIn(application, workspace.people.presales);
  const engagement = await addEngagement(application, workspace.id);
  designId = await addDesign(application, engagement, demoDesign('planted-faults'));
});
afterAll(() => application.close());

const path = (query: string) => `/api/designs/${designId}/${query}`;
const bytesOf = (response: { readonly body: unknown }): Buffer => response.body as Buffer;
const svg = async (query = '') =>
  bytesOf(await presales.get(path(`sheet.svg${query}`)).expect(200)).toString('utf8');

describe('a sheet fetched as a file', () => {
  test('is an SVG with its fonts, for presales too', async () => {
    const response = await presales.get(path('sheet.svg')).expect(200);
    expect(response.headers['content-type']).toMatch('image/svg+xml');
    expect(response.headers['content-disposition']).toMatch(
      /^attachment; filename="smf-l2-\d+-terminals-stretch-with-planted-faults\.svg"$/,
    );
    expect(response.headers['content-security-policy']).toContain('sandbox');
    const text = bytesOf(response).toString('utf8');
    expect(text).toContain('width="420mm" height="297mm"');
    expect(text.match(/@font-face/g)).toHaveLength(4);
    expect(text).toContain('verify on your equipment');
    expect(text).not.toContain('VNIs differ');
  });

  test('is a PDF of the paper asked for', async () => {
    const response = await presales.get(path('sheet.pdf?size=A4&look=print&findings=true')).expect(200);
    expect(response.headers['content-type']).toBe('application/pdf');
    expect(response.headers['content-disposition']).toMatch(/\.pdf"$/);
    const text = bytesOf(response).toString('latin1');
    expect(text).toMatch(/^%PDF-1\.7/);
    expect(text).toMatch(/\/MediaBox \[0 0 841\.889764 595\.27559\d*\]/);
  });

  test('shows what was asked for', async () => {
    expect(await svg('?findings=true')).toContain('VNIs differ');
    expect(await svg('?addresses=false')).not.toContain('10.255.0.1');
    expect(await svg('?layers=cabling,underlay')).toContain('Shows cabling and underlay only');
    const [segment] = Object.entries(demoDesign('planted-faults').segments).find(
      ([, { letter }]) => letter === 'B',
    )!;
    expect(await svg(`?segments=${segment}`)).toContain('Shows segment B only');
  });

  test.each([
    ['size=A5', 'size', '"A5"'],
    ['look=blueprint', 'look', '"blueprint"'],
    ['findings=yes', 'findings', '"yes"'],
    ['layers=cabling,roof', 'layers.1', '"roof"'],
    ['segments=nowhere', 'segments', '"nowhere"'],
    ['colour=red', 'colour', 'given'],
    ['sheet=0', 'sheet', '"0"'],
    ['sheet=2', 'sheet', '"2"'],
  ])('is refused with ?%s, and the answer names the field', async (query, field, value) => {
    for (const file of ['sheet.svg', 'sheet.pdf']) {
      const { body } = await presales.get(path(`${file}?${query}`)).expect(400);
      const { code, details } = body as {
        readonly code: string;
        readonly details: readonly { path: string; value: string; expected: string }[];
      };
      expect(code).toBe('invalid-request');
      expect(details[0]).toMatchObject({ path: field, value });
      expect(details[0]!.expected).toMatch(/^expected/);
    }
  });

  test('does not exist for people of another workspace, and is closed to installers while a draft', async () => {
    const other = await addWorkspace(application);
    const stranger = await signIn(application, other.people.owner);
    await stranger.get(path('sheet.pdf')).expect(404);
    await stranger.get(path('sheet.svg')).expect(404);
    const installer = await signIn(application, workspace.people.installer);
    await installer.get(path('sheet.pdf')).expect(403);
  });

  test('has a page for each sheet of a design on several, or is the one asked for', async () => {
    const made = hubDesign(9, { segments: ['a', 'b'] });
    const design = applyPatch(made, tidy(made, { largest: 'A3' }));
    const engagement = await addEngagement(application, workspace.id);
    const id = await addDesign(application, engagement, design);
    const of = Object.keys(design.layout.furtherSheets!).length + 1;
    const fetched = async (file: string) => presales.get(`/api/designs/${id}/${file}`);
    const pagesOf = (response: { readonly body: unknown }): number =>
      bytesOf(response)
        .toString('latin1')
        .match(/\/Type \/Page\b/g)!.length;
    expect(pagesOf(await fetched('sheet.pdf'))).toBe(of);
    expect(pagesOf(await fetched('sheet.pdf?sheet=2'))).toBe(1);
    const second = await fetched('sheet.svg?sheet=2');
    expect(second.headers['content-disposition']).toMatch(/-sheet-2\.svg"$/);
    expect(bytesOf(second).toString('utf8')).toContain(`>2/${of}<`);
    const { body } = await fetched(`sheet.svg?sheet=${of + 1}`);
    expect(body).toMatchObject({
      code: 'invalid-request',
      details: [{ path: 'sheet', value: `"${of + 1}"`, expected: `expected a number from 1 to ${of}` }],
    });
  });
});
