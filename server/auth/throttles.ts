import { createHash } from 'node:crypto';
import ipaddr from 'ipaddr.js';
import type { Pool } from 'pg';
import { RateLimiterMemory, RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import { Refusal } from '../errors.ts';

/** How often something may happen within a time. */
export interface Allowance {
  readonly times: number;
  readonly seconds: number;
}

/** Kept in PostgreSQL, so that several processes behind one address count together. */
export interface Throttles {
  /** Counts an attempt before the password is looked at; undone by `signedIn`. */
  signInAttempt(email: string, address: string): Promise<void>;
  signedIn(email: string, address: string): Promise<void>;
  /** Guesses at the current password of somebody who is signed in. */
  passwordAttempt(personId: string): Promise<void>;
  passwordFound(personId: string): Promise<void>;
  /** Codes of somebody whose password was right, or who is signed in. Right ones don't count. */
  secondStepAttempt(personId: string): Promise<void>;
  secondStepTaken(personId: string): Promise<void>;
  /** Guesses at the code for the first owner. */
  firstOwnerAttempt(address: string): Promise<void>;
  demoSignIn(address: string): Promise<void>;
  /** Invitations that a person sends, those sent again among them. */
  invitation(personId: string): Promise<void>;
  /** Guesses at links that are keys. */
  linkOpened(address: string): Promise<void>;
  /** Guesses at the passphrase of a share, wherever they come from. */
  passphraseAttempt(shareId: string): Promise<void>;
  passphraseFound(shareId: string): Promise<void>;
  /** Asking for a new password, whoever for. */
  resetAsked(address: string): Promise<void>;
  /** Whether somebody may be sent a link for a new password; never told to who asks. */
  isResetMailDue(email: string): Promise<boolean>;
  workspaceStart(personId: string): Promise<void>;
  workspaceExport(personId: string): Promise<void>;
  /** Requests that carry a token that is none, and those that carry a good one. */
  badToken(address: string): Promise<void>;
  tokenRequest(tokenId: string): Promise<void>;
  /** `weight` is how many ordinary requests the work of this one amounts to. */
  engineRequest(address: string, weight?: number): Promise<void>;
}

export const allowances = {
  signInOfPersonFromAddress: { times: 10, seconds: 15 * 60 },
  // Wider, so that nobody can lock a colleague out with a handful of requests.
  signInOfPerson: { times: 100, seconds: 60 * 60 },
  signInFromAddress: { times: 100, seconds: 15 * 60 },
  currentPassword: { times: 10, seconds: 15 * 60 },
  // RFC 4226 section 7.3: with three codes that fit at a time, 30 guesses a day find one in about 11,000 days.
  secondStep: { times: 5, seconds: 15 * 60 },
  secondStepOfDay: { times: 30, seconds: 24 * 60 * 60 },
  firstOwner: { times: 20, seconds: 60 * 60 },
  demoSignIn: { times: 120, seconds: 60 },
  invitation: { times: 100, seconds: 60 * 60 },
  linkOpened: { times: 100, seconds: 15 * 60 },
  passphrase: { times: 20, seconds: 15 * 60 },
  resetAsked: { times: 20, seconds: 60 * 60 },
  resetOfPerson: { times: 5, seconds: 60 * 60 },
  workspaceStart: { times: 20, seconds: 24 * 60 * 60 },
  workspaceExport: { times: 20, seconds: 60 * 60 },
  badToken: { times: 30, seconds: 15 * 60 },
  tokenRequest: { times: 600, seconds: 60 },
  engineRequest: { times: 120, seconds: 60 },
} as const satisfies { readonly [name: string]: Allowance };

export function createThrottles(pool: Pool): Throttles {
  const limiter = (name: keyof typeof allowances, insured = false) => {
    const { times: points, seconds: duration } = allowances[name];
    return new RateLimiterPostgres({
      storeClient: pool,
      tableName: 'rate_limits',
      tableCreated: true,
      clearExpiredByTimeout: true,
      keyPrefix: name,
      points,
      duration,
      ...(insured ? { insuranceLimiter: new RateLimiterMemory({ points, duration }) } : {}),
    });
  };
  const ofPersonFromAddress = limiter('signInOfPersonFromAddress');
  const ofPerson = limiter('signInOfPerson');
  const fromAddress = limiter('signInFromAddress');
  const currentPassword = limiter('currentPassword');
  const secondStep = limiter('secondStep');
  const secondStepOfDay = limiter('secondStepOfDay');
  const firstOwner = limiter('firstOwner');
  const demo = limiter('demoSignIn');
  const invitations = limiter('invitation');
  const links = limiter('linkOpened');
  const passphrases = limiter('passphrase');
  const resets = limiter('resetAsked');
  const resetsOfPerson = limiter('resetOfPerson');
  const workspaces = limiter('workspaceStart');
  const workspaceExports = limiter('workspaceExport');
  const badTokens = limiter('badToken');
  const tokens = limiter('tokenRequest');
  // The engine answers without a database too.
  const engine = limiter('engineRequest', true);
  const both = (email: string, address: string) => shortKey(`${email} ${addressKey(address)}`);

  return {
    async signInAttempt(email, address) {
      await take(fromAddress, addressKey(address));
      await take(ofPerson, shortKey(email));
      await take(ofPersonFromAddress, both(email, address));
    },
    async signedIn(email, address) {
      await Promise.all([
        fromAddress.reward(addressKey(address), 1),
        ofPerson.reward(shortKey(email), 1),
        ofPersonFromAddress.delete(both(email, address)),
      ]);
    },
    passphraseAttempt: (shareId) => take(passphrases, shareId),
    async passphraseFound(shareId) {
      await passphrases.delete(shareId);
    },
    passwordAttempt: (personId) => take(currentPassword, personId),
    async passwordFound(personId) {
      await currentPassword.delete(personId);
    },
    async secondStepAttempt(personId) {
      await take(secondStep, personId);
      await take(secondStepOfDay, personId);
    },
    async secondStepTaken(personId) {
      await Promise.all([secondStep.delete(personId), secondStepOfDay.reward(personId, 1)]);
    },
    firstOwnerAttempt: (address) => take(firstOwner, addressKey(address)),
    workspaceStart: (personId) => take(workspaces, personId),
    workspaceExport: (personId) => take(workspaceExports, personId),
    badToken: (address) => take(badTokens, addressKey(address)),
    tokenRequest: (tokenId) => take(tokens, tokenId),
    invitation: (personId) => take(invitations, personId),
    linkOpened: (address) => take(links, addressKey(address)),
    resetAsked: (address) => take(resets, addressKey(address)),
    isResetMailDue: (email) =>
      take(resetsOfPerson, shortKey(email)).then(
        () => true,
        (error: unknown) => {
          if (error instanceof Refusal) return false;
          throw error;
        },
      ),
    demoSignIn: (address) => take(demo, addressKey(address)),
    engineRequest: (address, weight = 1) => take(engine, addressKey(address), weight),
  };
}

async function take(limiter: RateLimiterPostgres, key: string, points = 1): Promise<void> {
  try {
    await limiter.consume(key, points);
  } catch (error) {
    if (!(error instanceof RateLimiterRes)) throw error;
    const retryAfterSeconds = Math.max(1, Math.ceil(error.msBeforeNext / 1000));
    throw new Refusal('too-many-requests', `Too many attempts; try again in ${inWords(retryAfterSeconds)}.`, {
      retryAfterSeconds,
    });
  }
}

function inWords(seconds: number): string {
  if (seconds < 90) return seconds === 1 ? '1 second' : `${seconds} seconds`;
  return `${Math.ceil(seconds / 60)} minutes`;
}

/** What stands for one customer of an access network: an IPv4 address, or the /64 that every IPv6 site has at least (RFC 6177 section 2). */
function addressKey(address: string): string {
  if (!ipaddr.isValid(address)) return 'unknown';
  const parsed = ipaddr.process(address);
  if (parsed.kind() === 'ipv4') return parsed.toString();
  return `${(parsed as ipaddr.IPv6).parts
    .slice(0, 4)
    .map((part) => part.toString(16))
    .join(':')}::/64`;
}

// Keys keep their length whatever people type, and hold no address of anybody.
function shortKey(text: string): string {
  return createHash('sha256').update(text).digest('base64url');
}
