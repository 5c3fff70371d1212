import { act, screen, waitFor } from '@testing-library/react';
import { expect, test } from 'vitest';
import type { SecondStepState } from '#contract/account.ts';
import { openDesignSchema } from '#contract/designs.ts';
import type { Session } from '#contract/session.ts';
import { callApi } from '../../src/lib/api-client.ts';
import { fakeApi, json, nothing, refusal, sessionOf, strangerSession } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const off: SecondStepState = { isOn: false, since: null, recoveryCodesLeft: 0, askedBy: [], isOffered: true };
const on: SecondStepState = { ...off, isOn: true, since: '2026-11-30T09:15:00.000Z', recoveryCodesLeft: 10 };
const offer = {
  secret: 'GEZDGNBVGY3TQOJQ',
  uri: 'otpauth://totp/Longpatch',
  picture: 'data:image/svg+xml;base64,',
};
const recoveryCodes = ['aaaaa-bbbbb-ccccc', 'ddddd-eeeee-fffff'];

function api(answers: Parameters<typeof fakeApi>[0] = {}, first = off) {
  let state = first;
  const done = (next: SecondStepState, body: unknown) => () => {
    state = next;
    return body === null ? new Response(null, { status: 204 }) : Response.json(body);
  };
  return fakeApi({
    'GET /api/session': json(sessionOf('owner')),
    'GET /api/account/second-step': () => Response.json(state),
    'POST /api/account/second-step': json(offer),
    'PUT /api/account/second-step': done(on, { recoveryCodes }),
    'POST /api/account/second-step/recovery-codes': done(on, { recoveryCodes: ['ggggg-hhhhh-iiiii'] }),
    'POST /api/account/second-step/off': done(off, null),
    ...answers,
  });
}

test('setting it up shows the secret in two ways, and then the recovery codes once', async () => {
  const { asked } = api();
  const { user } = renderRoute('/account/two-step');
  await user.click(await screen.findByRole('button', { name: 'Set up' }));
  expect(await screen.findByRole('img', { name: /scan with an authenticator/ })).toHaveAttribute(
    'src',
    offer.picture,
  );
  expect(screen.getByText('GEZD GNBV GY3T QOJQ')).toBeVisible();
  await user.type(screen.getByLabelText('Six digits from the app'), '123 456');
  await user.type(screen.getByLabelText('Your password'), 'low tide at seven');
  await user.click(screen.getByRole('button', { name: 'Switch on' }));
  for (const code of recoveryCodes) expect(await screen.findByText(code)).toBeVisible();
  expect(asked.find(({ method }) => method === 'PUT')?.body).toEqual({
    code: '123 456',
    password: 'low tide at seven',
  });
  await user.click(screen.getByRole('button', { name: 'I have kept them' }));
  expect(await screen.findByText('10 of 10 unused')).toBeVisible();
  expect(screen.queryByText(recoveryCodes[0]!)).toBeNull();
});

test('what is empty is told at its field and not sent, and so is what was refused', async () => {
  const { asked } = api({
    'PUT /api/account/second-step': refusal(403, 'wrong-credentials', {
      message: 'This code does not fit.',
      details: [{ path: 'code', value: 'what was typed', expected: 'expected a code that fits now' }],
    }),
  });
  const { user } = renderRoute('/account/two-step');
  await user.click(await screen.findByRole('button', { name: 'Set up' }));
  await user.click(await screen.findByRole('button', { name: 'Switch on' }));
  const [code, password] = [
    screen.getByLabelText('Six digits from the app'),
    screen.getByLabelText('Your password'),
  ];
  expect(code).toHaveAccessibleDescription(/^The code is empty/);
  expect(password).toHaveAccessibleDescription('The password is empty. Type it.');
  await user.type(code, '000000');
  await user.type(password, 'low tide{Enter}');
  await waitFor(() => expect(code).toHaveAccessibleDescription('This code does not fit.'));
  expect(password).not.toHaveAccessibleDescription();
  expect(asked.filter(({ method }) => method === 'PUT')).toHaveLength(1);
});

test('new recovery codes, and switching it off, ask for password and code', async () => {
  const { asked } = api({}, on);
  const { user } = renderRoute('/account/two-step');
  const prove = async (button: string) => {
    await user.type(screen.getByLabelText(/^Code from your authenticator app/), '123456');
    await user.type(screen.getByLabelText('Your password'), 'low tide at seven');
    await user.click(screen.getByRole('button', { name: button }));
  };
  await user.click(await screen.findByRole('button', { name: 'New recovery codes…' }));
  await prove('Make new codes');
  expect(await screen.findByText('ggggg-hhhhh-iiiii')).toBeVisible();
  await user.click(screen.getByRole('button', { name: 'I have kept them' }));
  await user.click(await screen.findByRole('button', { name: 'Switch off…' }));
  await prove('Switch off');
  expect(await screen.findByRole('button', { name: 'Set up' })).toBeVisible();
  expect(asked.filter(({ method }) => method === 'POST').map(({ body }) => body)).toEqual([
    { code: '123456', password: 'low tide at seven' },
    { code: '123456', password: 'low tide at seven' },
  ]);
});

const shut = (): Session => {
  const session = sessionOf('architect', []);
  return { ...session, memberships: session.memberships.map((each) => ({ ...each, needsSecondStep: true })) };
};

test('a workspace that asks for it leads here, and back afterwards', async () => {
  let session = shut();
  api({
    'GET /api/session': () => Response.json(session),
    'GET /api/account/second-step': () =>
      Response.json(session.memberships[0]?.needsSecondStep ? { ...off, askedBy: ['Ternwick Net'] } : on),
    'PUT /api/account/second-step': () => {
      session = sessionOf('architect');
      return Response.json({ recoveryCodes });
    },
    'GET /api/workspaces/w-1/engagements': json({ engagements: [] }),
  });
  const { user, address } = renderRoute('/');
  expect(await screen.findByText('Ternwick Net asks for two-step sign-in')).toBeVisible();
  await user.click(screen.getByRole('link', { name: 'Set it up' }));
  await user.click(await screen.findByRole('button', { name: 'Set up' }));
  await user.type(await screen.findByLabelText('Six digits from the app'), '123456');
  await user.type(screen.getByLabelText('Your password'), 'low tide at seven{Enter}');
  await user.click(await screen.findByRole('button', { name: 'I have kept them' }));
  await user.click(await screen.findByRole('link', { name: 'Go on' }));
  expect(await screen.findByText('No engagement yet')).toBeVisible();
  expect(address()).toBe('/workspaces/w-1/engagements');
});

test('a page whose address names no workspace leads here once the server refuses', async () => {
  api({
    'GET /api/session': json(shut()),
    'GET /api/designs/d-1': refusal(403, 'second-step-required'),
  });
  renderRoute('/checks');
  await screen.findByRole('heading', { name: 'Reference of checks' });
  await act(() => expect(callApi(openDesignSchema, '/api/designs/d-1')).rejects.toThrow('refused'));
  expect(await screen.findByText('This workspace asks for two-step sign-in')).toBeVisible();
});

test('signing in asks for the code after the password, and leads on', async () => {
  let session: Session = strangerSession;
  const { asked } = fakeApi({
    'GET /api/session': () => Response.json(session),
    'POST /api/session': () => {
      session = { ...strangerSession, secondStepAsked: true };
      return Response.json(session);
    },
    'POST /api/session/second-step': ({ body }) => {
      if ((body as { code: string }).code === '000000') {
        return Response.json(
          {
            code: 'wrong-credentials',
            message: 'This code does not fit.',
            details: [{ path: 'code', value: 'what was typed', expected: 'expected a code that fits now' }],
            requestId: 'r-1',
          },
          { status: 403 },
        );
      }
      session = sessionOf('architect');
      return Response.json(session);
    },
    'GET /api/workspaces/w-1/engagements': json({ engagements: [] }),
  });
  const { user } = renderRoute('/');
  await user.type(await screen.findByLabelText('E-mail'), 'r.halloran@ternwick.example');
  await user.type(screen.getByLabelText('Password'), 'saltmarsh{Enter}');
  const code = await screen.findByLabelText('Code from your authenticator app');
  await user.type(code, '12{Enter}');
  expect(code).toHaveAccessibleDescription(/^Code 12 is too short/);
  await user.clear(code);
  await user.type(code, '000000{Enter}');
  await waitFor(() => expect(code).toHaveAccessibleDescription('This code does not fit.'));
  await user.clear(code);
  await user.type(code, '123456{Enter}');
  expect(await screen.findByText('No engagement yet')).toBeVisible();
  expect(asked.filter(({ path }) => path.endsWith('second-step'))).toHaveLength(2);
});

test('whoever is asked for a code can start again', async () => {
  let session: Session = { ...strangerSession, secondStepAsked: true };
  fakeApi({
    'GET /api/session': () => Response.json(session),
    'DELETE /api/session': (asked) => {
      session = strangerSession;
      return nothing(asked);
    },
  });
  const { user } = renderRoute('/sign-in');
  await user.click(await screen.findByRole('button', { name: 'Start again' }));
  expect(await screen.findByLabelText('E-mail')).toBeVisible();
});
