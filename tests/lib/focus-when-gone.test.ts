import { afterEach, expect, it, vi } from 'vitest';
import { focusWhenGone } from '../../src/lib/focus-when-gone.ts';

const put = (html: string): HTMLElement => {
  document.body.innerHTML = `<main id="main" tabindex="-1">${html}</main><button id="beyond">Beyond</button>`;
  const gone = document.getElementById('gone')!;
  gone.focus();
  focusWhenGone(gone);
  return gone;
};
const settled = () => new Promise((resolve) => setTimeout(resolve, 20));
afterEach(() => (document.body.innerHTML = ''));

it.each([
  [
    'the control after it',
    '<button>A</button><button id="gone">X</button><a href="#" id="next">B</a>',
    'next',
  ],
  ['the control before it', '<button id="next">A</button><button id="gone">X</button>', 'next'],
  ['the page', '<p>Words</p><button id="gone">X</button>', 'main'],
])('the focus of a control that goes away goes on at %s', async (_where, html, next) => {
  put(html).remove();
  await vi.waitFor(() => expect(document.activeElement?.id).toBe(next));
});

it('who has moved on meanwhile is left alone', async () => {
  const gone = put('<button id="gone">X</button><button>B</button>');
  document.getElementById('beyond')!.focus();
  gone.remove();
  await settled();
  expect(document.activeElement?.id).toBe('beyond');
});
