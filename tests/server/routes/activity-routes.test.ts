import { afterAll, beforeAll, expect, test } from 'vitest';
import type { ActivityAction } from '#contract/activity.ts';
import { activityActions, activityPageSchema } from '#contract/activity.ts';
import { sentenceText } from '#contract/activity-words.ts';
import { recordActivity } from '../../../server/repositories/activity.ts';
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
let other: TestWorkspace;
let reviewer: TestBrowser;
let designId: string;

beforeAll(async () => {
  application = await startTestApplication();
  workspace = await addWorkspace(application);
  other = await addWorkspace(application);
  reviewer = await signIn(application, workspace.people.reviewer);
  designId = await addDesign(application, await addEngagement(application, workspace.id));
});
afterAll(() => application.close());

const record = (
  action: ActivityAction,
  name: string,
  {
    of = workspace,
    at = '2026-12-01T14:00:00Z',
    by = of.people.architect.id,
    details = {},
    design,
  }: {
    of?: TestWorkspace;
    at?: string;
    by?: string | null;
    details?: Record<string, string>;
    design?: string;
  } = {},
) =>
  recordActivity(application.database.knex, {
    workspaceId: of.id,
    at: new Date(at),
    action,
    personId: by,
    object: { kind: 'design', id: design ?? null, name },
    ...(design === undefined ? {} : { designId: design }),
    details,
  });

const read = async (query = '') => {
  const { body } = await reviewer.get(`/api/workspaces/${workspace.id}/activity${query}`).expect(200);
  return activityPageSchema.parse(body);
};
const sentences = async (query = '') => (await read(query)).activity.map(sentenceText);

test('what was done is read as sentences, the newest first, and filtered by person, action, design and day', async () => {
  const owner = workspace.people.owner.id;
  await record('design.created', 'Terminals stretch', { design: designId, at: '2026-11-28T09:00:00Z' });
  await record('review.approved', 'Terminals stretch', {
    design: designId,
    by: owner,
    details: { revision: 'C' },
    at: '2026-11-29T23:59:59Z',
  });
  await record('share.opened', 'Saltmarsh Ferries', {
    by: null,
    details: { design: 'Terminals stretch', revision: 'C' },
    at: '2026-11-30T00:00:00Z',
  });
  await record('design.created', 'Of others', { of: other });

  const approved = 'Some Owner approved revision C of Terminals stretch';
  const opened = 'A guest opened the link “Saltmarsh Ferries” to revision C of Terminals stretch';
  expect(await sentences()).toEqual([
    opened,
    approved,
    'Some Architect started the design Terminals stretch',
  ]);
  expect(await sentences(`?person=${owner}`)).toEqual([approved]);
  expect(await sentences('?action=share.opened')).toEqual([opened]);
  expect(await sentences(`?design=${designId}&from=2026-11-29`)).toEqual([approved]);
  expect(await sentences('?from=2026-11-29&to=2026-11-29')).toEqual([approved]);
  const { people, designs, activity } = await read();
  expect(people.map(({ name }) => name)).toEqual(['Some Architect', 'Some Owner']);
  expect(designs).toEqual([{ id: designId, name: 'A design' }]);
  expect(activity.map(({ object }) => object.isThere)).toEqual([false, true, true]);
});

test('a filter that says nothing it could is refused by name', async () => {
  for (const [query, words] of [
    ['action=design.burnt', '\'action\' is "design.burnt": expected the name of an action'],
    ['from=yesterday', '\'from\' is "yesterday": expected a day such as 2027-03-31'],
    ['person=me', '\'person\' is "me": expected the id of a person'],
    ['who=me', "'who' is given: expected no field of that name"],
  ]) {
    const { body } = await reviewer.get(`/api/workspaces/${workspace.id}/activity?${query}`).expect(400);
    expect((body as { message: string }).message).toContain(words);
  }
});

test('a hundred are a page, and the pages meet without a gap or a double', async () => {
  for (let number = 0; number < 205; number += 1)
    await record('design.archived', `Design ${number}`, { at: '2026-12-02T10:00:00Z' });
  const names: string[] = [];
  let query = '?action=design.archived';
  for (let page = 0; page < 3; page += 1) {
    const { activity, next } = await read(query);
    names.push(...activity.map(({ object }) => object.name));
    expect(next === null).toBe(page === 2);
    query = `?action=design.archived&before=${next}`;
  }
  expect(names).toEqual(Array.from({ length: 205 }, (_, index) => `Design ${204 - index}`));
});

test('CSV holds all that fits the filter, and no formula', async () => {
  await record('design.deleted', '=HYPERLINK("https://evil.example")');
  await record('engagement.created', '+1');
  const csv = async (query: string) =>
    (await reviewer.get(`/api/workspaces/${workspace.id}/activity.csv${query}`).expect(200)) as {
      text: string;
      headers: Record<string, string>;
    };
  const all = await csv('');
  expect(all.headers['content-type']).toBe('text/csv; charset=utf-8');
  expect(all.headers['content-disposition']).toBe('attachment; filename="activity.csv"');
  expect(all.text.trimEnd().split('\r\n')).toHaveLength(1 + 3 + 205 + 2);
  const one = await csv('?action=review.approved');
  expect(one.text).toBe(
    'When (UTC),Who,What,Note,Design,Action\r\n' +
      '2026-11-29T23:59:59.000Z,Some Owner,Some Owner approved revision C of Terminals stretch,,A design,review.approved\r\n',
  );
  const cells = all.text.split(/\r\n|,/).map((cell) => cell.replace(/^"/, ''));
  expect(cells.filter((cell) => /^[=+\-@\t]/.test(cell))).toEqual([]);
});

test('a name that begins as a formula gets an apostrophe in CSV', async () => {
  const { knex } = application.database;
  await knex('people').where({ id: workspace.people.presales.id }).update({ name: '=1+1' });
  await record('comment.written', 'A site', { by: workspace.people.presales.id });
  const { text } = await reviewer
    .get(`/api/workspaces/${workspace.id}/activity.csv?action=comment.written`)
    .expect(200);
  expect(text).toContain(`"'=1+1","'=1+1 commented on A site"`);
});

test('what was done stays readable when design and person are gone', async () => {
  const { knex } = application.database;
  const gone = await addDesign(application, await addEngagement(application, workspace.id));
  await record('finding.waived', 'Two VNIs', {
    design: gone,
    details: { design: 'A pair', reason: 'Agreed', expiresOn: '2027-03-31' },
  });
  await knex('designs').where({ id: gone }).delete();
  await knex('memberships').where({ person_id: workspace.people.architect.id }).delete();
  const [newest] = (await read('?action=finding.waived')).activity;
  expect(sentenceText(newest!)).toBe('Some Architect waived “Two VNIs” in A pair');
  expect(newest).toMatchObject({ design: null, object: { isThere: false } });
});

test('every action has a sentence of its own', () => {
  const person = { id: 'p', name: 'Noor Okafor' };
  const said = activityActions.map((action) =>
    sentenceText({
      action,
      person,
      object: { kind: 'design', id: null, name: 'It', isThere: false },
      design: null,
      details: { revision: 'C', design: 'Terminals stretch' },
    }),
  );
  expect(new Set(said).size).toBe(activityActions.length);
  expect(said.filter((sentence) => /undefined|\s{2}|\s$/.test(sentence))).toEqual([]);
});
