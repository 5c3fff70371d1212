import { expect, test } from 'vitest';
import { themeCss } from '#drawing/theme/tokens.ts';

// Written anew by `npx vitest run --project client -u tests/app/tokens-css.test.ts`.
test('the stylesheet of the tokens is what the drawing says they are', async () => {
  const heading = '/* Written from src/drawing/theme/tokens.ts by tests/app/tokens-css.test.ts. */\n';
  await expect(heading + themeCss()).toMatchFileSnapshot('../../src/styles/tokens.css');
});
