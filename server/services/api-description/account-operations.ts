import {
  apiTokenListSchema,
  apiTokenSchema,
  createApiTokenSchema,
  createdApiTokenSchema,
  deleteAccountSchema,
  deletionPreviewSchema,
  recoveryCodesSchema,
  secondStepOfferSchema,
  secondStepProofSchema,
  secondStepStateSchema,
  sessionListSchema,
} from '#contract/account.ts';
import {
  acceptInvitationSchema,
  acceptedInvitationSchema,
  offeredInvitationSchema,
  openInvitationSchema,
} from '#contract/invitations.ts';
import { mailSettingsSchema } from '#contract/mail-settings.ts';
import {
  askForResetSchema,
  openResetSchema,
  openedResetSchema,
  resetPasswordSchema,
} from '#contract/password-reset.ts';
import {
  changePasswordSchema,
  demoSignInSchema,
  secondStepSchema,
  sessionSchema,
  signInSchema,
} from '#contract/session.ts';
import { firstOwnerSchema, firstOwnerStateSchema } from '#contract/workspaces.ts';
import type { Operation } from './operation.ts';

const session = { schema: sessionSchema };

export const sessionOperations = {
  'GET /api/session': {
    summary: 'Say who is signed in',
    description:
      'Also answers the token that every changing request of this session carries in the header X-CSRF-Token.',
    answer: session,
  },
  'POST /api/session': {
    summary: 'Sign in',
    description: 'Where a second step is set up, the answer asks for it and nobody is signed in yet.',
    body: signInSchema,
    answer: session,
  },
  'POST /api/session/second-step': {
    summary: 'Sign in with a code, after the password',
    body: secondStepSchema,
    answer: session,
  },
  'POST /api/session/demo': {
    summary: 'Sign in as one of the people of the demo',
    body: demoSignInSchema,
    answer: session,
  },
  'DELETE /api/session': { summary: 'Sign out', answer: { status: 204 } },
  'POST /api/password-reset': {
    summary: 'Ask for a link that sets a new password',
    description: 'Answers the same whoever the address belongs to.',
    body: askForResetSchema,
    answer: { status: 202 },
  },
  'POST /api/password-reset/link': {
    summary: 'Say whose password a link sets',
    body: openResetSchema,
    answer: { schema: openedResetSchema },
  },
  'POST /api/password-reset/password': {
    summary: 'Set a new password with a link',
    body: resetPasswordSchema,
    answer: { status: 204 },
  },
  'POST /api/invitation': {
    summary: 'Say what a link invites to',
    body: openInvitationSchema,
    answer: { schema: offeredInvitationSchema },
  },
  'POST /api/invitation/acceptance': {
    summary: 'Accept an invitation',
    body: acceptInvitationSchema,
    answer: { schema: acceptedInvitationSchema },
  },
  'GET /api/first-owner': {
    summary: 'Say whether the server still waits for its first person',
    answer: { schema: firstOwnerStateSchema },
  },
  'POST /api/first-owner': {
    summary: 'Become the first owner, with the code that the server printed',
    body: firstOwnerSchema,
    answer: { status: 201, schema: sessionSchema },
  },
} as const satisfies { readonly [route: string]: Operation };

export const accountOperations = {
  'PUT /api/account/password': {
    summary: 'Change the password',
    description: 'Every other session of the person ends.',
    body: changePasswordSchema,
    answer: session,
  },
  'GET /api/account/second-step': {
    summary: 'Say whether the sign-in asks for a code',
    answer: { schema: secondStepStateSchema },
  },
  'POST /api/account/second-step': {
    summary: 'Begin to set up a second step',
    answer: { schema: secondStepOfferSchema },
  },
  'PUT /api/account/second-step': {
    summary: 'Switch the second step on',
    body: secondStepProofSchema,
    answer: { schema: recoveryCodesSchema },
  },
  'POST /api/account/second-step/off': {
    summary: 'Switch the second step off',
    body: secondStepProofSchema,
    answer: { status: 204 },
  },
  'POST /api/account/second-step/recovery-codes': {
    summary: 'Make new recovery codes',
    body: secondStepProofSchema,
    answer: { schema: recoveryCodesSchema },
  },
  'GET /api/account/sessions': {
    summary: 'List where the reader is signed in',
    answer: { schema: sessionListSchema },
  },
  'DELETE /api/account/sessions': { summary: 'End all other sessions', answer: { status: 204 } },
  'DELETE /api/account/sessions/:sessionId': { summary: 'End a session', answer: { status: 204 } },
  'GET /api/account/tokens': {
    summary: "List the reader's tokens",
    answer: { schema: apiTokenListSchema },
  },
  'POST /api/account/tokens': {
    summary: 'Make a token',
    description: 'The secret is in this answer and never again.',
    body: createApiTokenSchema,
    answer: { status: 201, schema: createdApiTokenSchema },
  },
  'DELETE /api/account/tokens/:tokenId': { summary: 'Revoke a token', answer: { schema: apiTokenSchema } },
  'GET /api/account/deletion': {
    summary: 'Say what deleting the account would mean',
    answer: { schema: deletionPreviewSchema },
  },
  'POST /api/account/deletion': {
    summary: 'Delete the account',
    description: "The person's name stays on what they did.",
    body: deleteAccountSchema,
    answer: { status: 204 },
  },
  'GET /api/account/mail': { summary: 'Say which mail comes when', answer: { schema: mailSettingsSchema } },
  'PUT /api/account/mail': {
    summary: 'Choose which mail comes when',
    body: mailSettingsSchema,
    answer: { schema: mailSettingsSchema },
  },
} as const satisfies { readonly [route: string]: Operation };
