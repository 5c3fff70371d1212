import type { Knex } from 'knex';
import QRCode from 'qrcode';
import type { SecondStepState } from '#contract/account.ts';
import {
  isSixDigits,
  newRecoveryCodes,
  newTotpSecret,
  recoveryCodeHash,
  tidyCode,
  timeStepOf,
  totpSecretText,
  totpUri,
} from '../auth/one-time-codes.ts';
import { Refusal } from '../errors.ts';
import { isDemoPerson } from '../repositories/demo-people.ts';
import { listMemberships } from '../repositories/memberships.ts';
import type { Account } from '../repositories/people.ts';
import {
  countRecoveryCodes,
  deleteSecondStep,
  findSecondStep,
  putOfferedSecret,
  putSecret,
  replaceRecoveryCodes,
  setConfirmed,
  spendRecoveryCode,
  takeTimeStep,
} from '../repositories/second-steps.ts';
import { deleteOtherSessions } from '../repositories/sessions.ts';
import { requirePassword } from './accounts.ts';
import { announcePlacesOf } from './announce-places.ts';
import type { Context } from './context.ts';

/** Whether the person's sign-in asks for a code, and who asks them to have it so. */
export async function readSecondStep({ database }: Context, personId: string): Promise<SecondStepState> {
  const { knex } = database;
  const [row, left, memberships, isDemo] = await Promise.all([
    findSecondStep(knex, personId),
    countRecoveryCodes(knex, personId),
    listMemberships(knex, personId),
    isDemoPerson(knex, personId),
  ]);
  const since = row?.confirmedAt ?? null;
  return {
    isOn: since !== null,
    since: since?.toISOString() ?? null,
    recoveryCodesLeft: left,
    askedBy: memberships
      .filter(({ requiresSecondStep }) => requiresSecondStep)
      .map(({ workspaceName }) => workspaceName),
    isOffered: !isDemo,
  };
}

/** A new secret for an authenticator app. It counts once a code of it is confirmed; until then a later one takes its place. */
export async function offerSecondStep(
  { database, clock, secretBox }: Context,
  { id, email }: Account,
): Promise<{ readonly secret: string; readonly uri: string; readonly picture: string }> {
  const { knex } = database;
  if (await isDemoPerson(knex, id)) {
    throw new Refusal(
      'conflict',
      'The people of the demo sign in with one press, so there is no second step to set up for them.',
    );
  }
  const secret = newTotpSecret();
  if (!(await putOfferedSecret(knex, id, secretBox.seal(secret, id), clock()))) throw alreadyOn();
  const uri = totpUri(secret, email);
  const svg = await QRCode.toString(uri, { type: 'svg', errorCorrectionLevel: 'M', margin: 4 });
  const picture = `data:image/svg+xml;base64,${Buffer.from(svg).toString('base64')}`;
  return { secret: totpSecretText(secret), uri, picture };
}

/** Switches two-step sign-in on and ends the person's other sessions, which did without. Answers the recovery codes. */
export async function confirmSecondStep(
  context: Context,
  { id }: Account,
  { code, password }: { readonly code: string; readonly password: string },
  keptSessionId: string,
): Promise<readonly string[]> {
  const { database, clock } = context;
  await requirePassword(context, id, password, 'password');
  return database.knex.transaction(async (trx) => {
    const offered = await findSecondStep(trx, id);
    if (offered === null) {
      throw new Refusal('conflict', 'There is no secret to confirm yet; begin the set-up again.');
    }
    if (offered.confirmedAt !== null) throw alreadyOn();
    if (!(await takeTotp(context, trx, id, offered.secret, tidyCode(code)))) throw wrongCode(code);
    if (!(await setConfirmed(trx, id, clock()))) throw alreadyOn();
    const codes = await renewedCodes(trx, id);
    await deleteOtherSessions(trx, id, keptSessionId);
    await announcePlacesOf(trx, id);
    return codes;
  });
}

/** Switches it off again. */
export async function endSecondStep(
  context: Context,
  personId: string,
  proof: { readonly code: string; readonly password: string },
): Promise<void> {
  await requirePassword(context, personId, proof.password, 'password');
  await requireSecondStep(context, personId, proof.code);
  await deleteSecondStep(context.database.knex, personId);
}

/** New recovery codes; the old ones are worth nothing from then on. */
export async function renewRecoveryCodes(
  context: Context,
  personId: string,
  proof: { readonly code: string; readonly password: string },
): Promise<readonly string[]> {
  await requirePassword(context, personId, proof.password, 'password');
  await requireSecondStep(context, personId, proof.code);
  return context.database.knex.transaction((trx) => renewedCodes(trx, personId));
}

/** Takes a code of somebody who has two-step sign-in, once; refuses any other. */
export async function requireSecondStep(context: Context, personId: string, code: string): Promise<void> {
  const { knex } = context.database;
  const row = await findSecondStep(knex, personId);
  if ((row?.confirmedAt ?? null) === null || row === null) {
    throw new Refusal('conflict', 'Two-step sign-in is not on, so there is no code to check.');
  }
  const tidy = tidyCode(code);
  const isTaken = isSixDigits(tidy)
    ? await takeTotp(context, knex, personId, row.secret, tidy)
    : await spendRecoveryCode(knex, personId, recoveryCodeHash(tidy));
  if (!isTaken) throw wrongCode(code);
}

async function takeTotp(
  { secretBox, clock }: Context,
  knex: Knex,
  personId: string,
  sealed: Buffer,
  code: string,
): Promise<boolean> {
  const opened = secretBox.open(sealed, personId);
  if (opened === null) {
    throw new Refusal(
      'wrong-credentials',
      'Codes cannot be checked since the server’s secret was changed; use a recovery code, then set two-step sign-in up anew.',
      { status: 403 },
    );
  }
  const timeStep = timeStepOf(code, opened.secret, clock());
  if (timeStep === null || !(await takeTimeStep(knex, personId, timeStep))) return false;
  if (opened.isUnderOldKey) await putSecret(knex, personId, secretBox.seal(opened.secret, personId));
  return true;
}

async function renewedCodes(trx: Knex.Transaction, personId: string): Promise<readonly string[]> {
  const codes = newRecoveryCodes();
  await replaceRecoveryCodes(trx, personId, codes.map(recoveryCodeHash));
  return codes;
}

function wrongCode(code: string): Refusal {
  const words = isSixDigits(tidyCode(code))
    ? 'This code does not fit, has run out or was used before; wait for the next one in your authenticator app and type that.'
    : 'This is no recovery code of yours that is unused; type another, or six digits from your authenticator app.';
  return new Refusal('wrong-credentials', words, {
    // 401 would tell the browser that the session had ended.
    status: 403,
    details: [{ path: 'code', value: 'what was typed', expected: 'expected a code that fits now, unused' }],
  });
}

const alreadyOn = (): Refusal =>
  new Refusal('conflict', 'Two-step sign-in is on already; switch it off before you set it up anew.');
