import { screen, waitFor, within } from '@testing-library/react';
import { expect, test } from 'vitest';
import { defaultMailSettings } from '#contract/mail-settings.ts';
import { fakeApi, json, refusal, sessionOf } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

const settingsApi = (answers: Parameters<typeof fakeApi>[0] = {}) =>
  fakeApi({
    'GET /api/session': json(sessionOf('reviewer')),
    'GET /api/account/mail': json(defaultMailSettings),
    'PUT /api/account/mail': ({ body }) => Response.json(body),
    ...answers,
  });

const choice = (label: string, option: string) =>
  within(screen.getByRole('radiogroup', { name: label })).getByRole('radio', { name: option });

test('each choice is kept as it is made', async () => {
  const { asked } = settingsApi();
  const { user } = renderRoute('/account/mail');
  await screen.findByRole('radiogroup', { name: 'Somebody mentions me in a comment' });
  expect(choice('A customer opens what I shared', 'No mail')).toBeChecked();
  await user.click(choice('Somebody mentions me in a comment', 'Once a day'));
  await user.selectOptions(screen.getByLabelText(/^The mail of the day/), 'Europe/Lisbon');
  await waitFor(() => expect(asked.filter(({ method }) => method === 'PUT')).toHaveLength(2));
  expect(asked.at(-1)?.body).toEqual({
    ...defaultMailSettings,
    mention: 'daily',
    timeZone: 'Europe/Lisbon',
  });
  expect(await screen.findByText('Saved')).toBeVisible();
});

test('a choice that could not be kept goes back, and says why', async () => {
  settingsApi({
    'PUT /api/account/mail': refusal(503, 'unavailable', { message: 'Try again in a moment.' }),
  });
  const { user } = renderRoute('/account/mail');
  await screen.findByRole('radiogroup', { name: 'Somebody mentions me in a comment' });
  await user.click(choice('Somebody mentions me in a comment', 'No mail'));
  expect(await screen.findByRole('alert')).toHaveTextContent('Not saved. Try again in a moment.');
  await waitFor(() => expect(choice('Somebody mentions me in a comment', 'At once')).toBeChecked());
});
