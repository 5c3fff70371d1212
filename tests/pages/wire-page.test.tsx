import { screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { fakeApi, json, sessionOf, strangerSession } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const asStranger = () => fakeApi({ 'GET /api/session': json(strangerSession) });
const open = async (path: string) => {
  const rendered = renderRoute(path);
  await screen.findByRole('heading', { level: 1, name: 'Wire' });
  return rendered;
};
const verdict = () => screen.getByText(/passes\.|packet that does\./).closest('p');

describe('before anybody has signed in', () => {
  it('the page computes, and offers the sign-in with a way back to the same inputs', async () => {
    asStranger();
    await open('/wire?nat=yes');
    expect(verdict()).toHaveTextContent('112 B over. 1612 B do not pass 1500 B whole; 1388 B is the largest');
    const signIn = await screen.findByRole('link', { name: 'Sign in' });
    expect(signIn).toHaveAttribute('href', `/sign-in?return=${encodeURIComponent('/wire?nat=yes')}`);
  });

  it('the page computes without a server that answers', async () => {
    fakeApi({});
    await open('/wire');
    expect(verdict()).toHaveTextContent('104 B over. 1604 B do not pass 1500 B whole; 1396 B is the largest');
    expect(screen.queryByRole('link', { name: 'Sign in' })).toBeNull();
  });

  it('the sign-in leads here', async () => {
    asStranger();
    const { user, address } = renderRoute('/sign-in');
    await user.click(await screen.findByRole('link', { name: 'Wire' }));
    await screen.findByRole('heading', { level: 1, name: 'Wire' });
    expect(address()).toBe('/wire');
  });
});

it('somebody who is signed in finds it in the bar', async () => {
  fakeApi({ 'GET /api/session': json(sessionOf('reviewer')) });
  await open('/wire');
  const bar = await screen.findByRole('navigation', { name: 'Main' });
  expect(within(bar).getByRole('link', { name: 'Wire' })).toHaveAttribute('aria-current', 'page');
  expect(screen.queryByRole('link', { name: 'Sign in' })).toBeNull();
});

describe('what is typed and chosen', () => {
  it('is computed at once and stands in the address', async () => {
    asStranger();
    const { user, address } = await open('/wire');
    const mtu = screen.getByRole('textbox', { name: 'Transport MTU' });
    await user.clear(mtu);
    await user.type(mtu, '1604{Enter}');
    expect(address()).toBe('/wire?mtu=1604');
    expect(verdict()).toHaveTextContent('Passes whole. 1604 B in 1604 B, 0 to spare');
    await user.click(
      within(screen.getByRole('radiogroup', { name: 'ESP' })).getByRole('radio', { name: 'None' }),
    );
    expect(address()).toBe('/wire?mtu=1604&esp=none');
    expect(verdict()).toHaveTextContent('Passes whole. 1550 B in 1604 B, 54 to spare');
    expect(screen.queryByRole('combobox', { name: 'Transform' })).toBeNull();
    await user.click(screen.getByRole('button', { name: 'Start again' }));
    expect(address()).toBe('/wire');
  });

  it('comes from the address of a colleague', async () => {
    asStranger();
    await open('/wire?packet=1396&mtu=1492&link=100+Mbit/s&mix=letters&letters=zz');
    expect(screen.getByRole('textbox', { name: 'Inner packet' })).toHaveValue('1396');
    expect(screen.getByRole('textbox', { name: 'Link rate' })).toHaveValue('100 Mbit/s');
    expect(screen.getByRole('textbox', { name: 'Mix letters' })).toHaveValue('zz');
    expect(verdict()).toHaveTextContent('8 B over. 1500 B do not pass 1492 B');
  });

  it('can be a stack to start from, which then may be changed', async () => {
    asStranger();
    const { user, address } = await open('/wire');
    const presets = screen.getByRole('combobox', { name: 'Start from' });
    await user.selectOptions(presets, 'VXLAN in IPsec with AES-CBC and HMAC-SHA2');
    expect(address()).toBe('/wire?transform=aes-cbc&integrity=hmac-sha2-256-128');
    expect(verdict()).toHaveTextContent('1388 B is the largest');
    await user.selectOptions(screen.getByRole('combobox', { name: 'Integrity' }), 'HMAC-SHA2-512-256');
    expect(verdict()).toHaveTextContent('1372 B is the largest');
    expect(presets).toHaveDisplayValue('your own combination');
  });

  it('takes along the integrity that a transform needs, and leaves it off where none goes with it', async () => {
    asStranger();
    const { user, address } = await open('/wire');
    const transform = screen.getByRole('combobox', { name: 'Transform' });
    await user.selectOptions(transform, 'AES-CTR');
    expect(address()).toBe('/wire?transform=aes-ctr&integrity=hmac-sha2-256-128');
    await user.selectOptions(transform, 'ChaCha20-Poly1305');
    expect(address()).toBe('/wire?transform=chacha20-poly1305');
  });

  it('may be the packet that passes, by one press', async () => {
    asStranger();
    const { user, address } = await open('/wire');
    await user.click(screen.getByRole('button', { name: 'Send 1396 B instead' }));
    expect(address()).toBe('/wire?packet=1396');
    expect(verdict()).toHaveTextContent('Passes whole. 1500 B in 1500 B, 0 to spare');
    expect(screen.queryByRole('button', { name: /instead/ })).toBeNull();
    expect(screen.getByRole('main')).toHaveFocus();
  });

  it('counts the bytes of an access link of which only the overhead is known', async () => {
    asStranger();
    const { user, address } = await open('/wire');
    await user.selectOptions(screen.getByRole('combobox', { name: 'Access overhead' }), 'Bytes');
    const bytes = screen.getByRole('textbox', { name: 'Bytes of overhead' });
    await user.clear(bytes);
    await user.type(bytes, '12{Enter}');
    expect(address()).toBe('/wire?access=12');
    expect(verdict()).toHaveTextContent(
      '1604 B do not pass 1488 B that the access link leaves whole; 1384 B',
    );
  });
});

describe('what cannot be', () => {
  it('is refused where it is typed, and the last good value goes on counting', async () => {
    asStranger();
    const { user, address } = await open('/wire');
    const packet = screen.getByRole('textbox', { name: 'Inner packet' });
    await user.clear(packet);
    await user.type(packet, '19{Enter}');
    expect(packet).toBeInvalid();
    expect(packet).toHaveAccessibleDescription('Inner packet 19: type a whole number from 20 to 65575.');
    expect(address()).toBe('/wire');
    expect(verdict()).toHaveTextContent('1604 B do not pass');
  });

  it('is named where it stands when an address says it, and nothing is computed', async () => {
    asStranger();
    await open('/wire?mtu=abc&transform=rot13');
    expect(screen.getByRole('textbox', { name: 'Transport MTU' })).toHaveAccessibleDescription(
      'Transport MTU abc: type a whole number from 68 to 65535.',
    );
    expect(screen.getByRole('combobox', { name: 'Transform' })).toHaveAccessibleDescription(
      /^Transform rot13: choose one of aes-gcm-16,/,
    );
    expect(screen.getByText('Nothing is computed until this is mended.')).toBeVisible();
    expect(screen.queryByText(/Largest inner packet/)).toBeNull();
  });

  it('is said at the choice that gives way when two do not go together', async () => {
    asStranger();
    const { user } = await open('/wire?tags=1');
    await user.click(
      within(screen.getByRole('radiogroup', { name: 'VXLAN over' })).getByRole('radio', { name: 'None' }),
    );
    expect(screen.getByRole('group', { name: 'Inner tags' })).toHaveAccessibleDescription(
      /^Inner tags 1: without VXLAN there is no inner frame to tag\. Choose 0/,
    );
  });
});

it('what is drawn stands in tables as well', async () => {
  asStranger();
  await open('/wire?packet=1390');
  expect(
    screen.getByRole('img', { name: 'A packet of 1390 B becomes 1496 B in a pipe of 1500 B.' }),
  ).toBeVisible();
  for (const summary of screen.getAllByText('The same in a table')) summary.closest('details')!.open = true;
  const bytes = screen.getByRole('table', { name: 'Bytes on the wire' });
  expect(
    within(bytes).getByRole('row', { name: /^ESP padding 2 1440 \+ 2 up to a multiple of 4/ }),
  ).toBeVisible();
  expect(
    within(bytes).getByRole('row', { name: 'Outermost IP packet 1496 4 to spare in 1500' }),
  ).toBeVisible();
  const treads = screen.getByRole('table', { name: 'Padding around the limit, in bytes' });
  expect(within(treads).getByRole('row', { name: '1393 to 1396 1500 0 to spare' })).toBeVisible();
  expect(within(treads).getByRole('row', { name: '1397 to 1400 1504 4 over' })).toBeVisible();
});
