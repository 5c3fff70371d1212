import { expect, test } from 'vitest';
import { readDesignFile } from '../../src/features/engagements/read-design-file.ts';
import { titleProblem } from '../../src/features/engagements/title-problem.ts';

const file = (text: string): File => new File([text], 'design.json');

test('a design’s file gives its document and the title in it', async () => {
  expect(await readDesignFile(file('{"meta":{"title":" Terminals "}}'))).toEqual({
    ok: true,
    name: 'design.json',
    document: { meta: { title: ' Terminals ' } },
    title: 'Terminals',
  });
});

test.each(['[]', '5', 'null', '{"meta":null}', '{"meta":{"title":7}}', '{"meta":{"title":"  "}}'])(
  'JSON without a title has none, and whether it is a design is not decided here: %s',
  async (text) => {
    expect(await readDesignFile(file(text))).toMatchObject({ ok: true, title: null });
  },
);

test.each([
  ['', /design\.json is empty\. Choose a file/],
  ['{"meta":', /design\.json is not JSON \(.+\)\. Choose a file/],
])('what is no JSON is refused with the file, the reason and the way out: %j', async (text, sentence) => {
  const read = await readDesignFile(file(text));
  expect(read).toMatchObject({ ok: false, problem: expect.stringMatching(sentence) as string });
});

test('a title has to be there and to be short enough', () => {
  expect(titleProblem('Title', ' ')).toBe('Title is empty. Type at least one character.');
  expect(titleProblem('Title', 'x'.repeat(81))).toBe('Title has 81 characters. Shorten it to 80.');
  expect(titleProblem('Title', ` ${'x'.repeat(80)} `)).toBeUndefined();
});
