import connectPgSimple from 'connect-pg-simple';
import { csrfSync } from 'csrf-sync';
import type { Request, RequestHandler, Response } from 'express';
import session from 'express-session';
import passport from 'passport';
import { Strategy as LocalStrategy } from 'passport-local';
import type { Config } from '../config.ts';
import { serverSecrets } from '../config.ts';
import type { Database } from '../db/open-database.ts';
import { Refusal } from '../errors.ts';
import type { Account } from '../repositories/people.ts';
import { findAccount, findAccountByEmail } from '../repositories/people.ts';
import { isPasswordRight } from './passwords.ts';

declare global {
  // Passport's own place for the type of who is signed in.
  // eslint-disable-next-line @typescript-eslint/no-namespace
  namespace Express {
    // eslint-disable-next-line @typescript-eslint/no-empty-object-type
    interface User extends Account {}
  }
}

/** Somebody whose password was right and whose code is still to come. */
export interface PendingSignIn {
  readonly personId: string;
  readonly credentialVersion: number;
  readonly keep: boolean;
  readonly atMs: number;
}

declare module 'express-session' {
  interface SessionData {
    /** How the session began, for its owner to tell it from others by. */
    about: { readonly startedAt: string; readonly address: string; readonly userAgent: string };
    pendingSignIn: PendingSignIn;
  }
}

interface StoredUser {
  readonly id: string;
  readonly credentialVersion: number;
}

const keptForMs = 30 * 24 * 60 * 60 * 1000;
const anonymousForMs = 2 * 60 * 60 * 1000;
/** How long a session that isn't kept lasts after its last use. */
export const idleSeconds = 24 * 60 * 60;
const secondStepWithinMs = 10 * 60 * 1000;
const userAgentCharacters = 300;

const csrf = csrfSync({ size: 32 });

/** Refuses changing requests that do not carry the session's token in X-CSRF-Token (synchroniser token). */
export const refuseForgedRequests: RequestHandler = csrf.csrfSynchronisedProtection;

export interface Sessions {
  /** Read who is signed in from the session cookie. */
  readonly handlers: readonly RequestHandler[];
  /**
   * Whose e-mail and password the request's body carries: nobody (null), after the same time, for a wrong password and
   * for an unknown person.
   */
  checkPassword(req: Request, res: Response): Promise<Account | null>;
}

/** Sessions live in PostgreSQL, so that any process can answer. */
export function createSessions(
  database: Database,
  config: Config,
  onError: (error: unknown) => void,
): Sessions {
  const isHttps = config.publicUrl.startsWith('https:');
  const PgStore = connectPgSimple(session);
  const authenticator = createAuthenticator(database);
  return {
    handlers: [
      session({
        store: new PgStore({
          pool: database.pool,
          tableName: 'sessions',
          ttl: idleSeconds,
          errorLog: onError,
        }),
        // What was signed with the secret before the present one still counts.
        secret: serverSecrets(config),
        // RFC 6265bis (draft) section 4.1.3.2: the prefix keeps other hosts and plain HTTP from setting this cookie.
        name: isHttps ? '__Host-longpatch' : 'longpatch',
        cookie: { httpOnly: true, sameSite: 'lax', secure: isHttps, path: '/' },
        resave: false,
        saveUninitialized: false,
        unset: 'destroy',
      }),
      authenticator.initialize() as RequestHandler,
      authenticator.session() as RequestHandler,
    ],
    checkPassword: (req, res) =>
      new Promise((resolve, reject) => {
        const decided = (error: unknown, account: Account | false | null | undefined) =>
          error ? reject(error as Error) : resolve(account || null);
        void (authenticator.authenticate('local', decided) as RequestHandler)(req, res, reject);
      }),
  };
}

/**
 * Starts a new session for a person, under a new id: one that was planted before is worth nothing. It asks for no second
 * step: whoever comes with a password alone is `admit`ted.
 */
export async function startSession(req: Request, account: Account, keep: boolean): Promise<void> {
  const { about: before } = req.session;
  const isSamePerson = req.user?.id === account.id;
  await done((settle) => req.logIn(account, settle));
  if (keep) req.session.cookie.maxAge = keptForMs;
  req.session.about = {
    startedAt: (isSamePerson ? before?.startedAt : undefined) ?? new Date().toISOString(),
    address: req.ip ?? '',
    userAgent: (req.headers['user-agent'] ?? '').slice(0, userAgentCharacters),
  };
  await saveWithToken(req);
}

/** Starts a session that waits for a second step; nobody is signed in with it yet. */
export async function askForSecondStep(req: Request, account: Account, keep: boolean): Promise<void> {
  await done((settle) => req.session.regenerate(settle));
  req.user = undefined;
  req.session.cookie.maxAge = secondStepWithinMs;
  const { id, credentialVersion } = account;
  req.session.pendingSignIn = { personId: id, credentialVersion, keep, atMs: Date.now() };
  await saveWithToken(req);
}

/** Whose second step this session waits for; null when it waits for none or has waited too long. */
export function pendingSignInOf(req: Request): PendingSignIn | null {
  const pending = req.session.pendingSignIn;
  if (pending === undefined || Date.now() - pending.atMs > secondStepWithinMs) return null;
  return pending;
}

async function saveWithToken(req: Request): Promise<void> {
  csrf.generateToken(req, true);
  await done((settle) => req.session.save(settle));
}

function done(work: (settle: (error?: unknown) => void) => unknown): Promise<void> {
  return new Promise<void>((resolve, reject) => {
    work((error) => (error ? reject(error as Error) : resolve()));
  });
}

/** Ends this session for good. */
export async function endSession(req: Request): Promise<void> {
  await done((settle) => req.session.destroy(settle));
}

/** The token that changing requests must carry; a visitor's session is made for it, and short. */
export function csrfTokenOf(req: Request): string {
  if (req.user === undefined && pendingSignInOf(req) === null) req.session.cookie.maxAge = anonymousForMs;
  return csrf.generateToken(req);
}

export function isKept(req: Request): boolean {
  return req.session.cookie.originalMaxAge === keptForMs;
}

/** Who is signed in; refuses when nobody is. */
export function requirePerson(req: Request): Account {
  if (req.user === undefined) throw new Refusal('not-signed-in', 'Sign in first; your session has ended.');
  return req.user;
}

function createAuthenticator(database: Database) {
  const authenticator = new passport.Passport();
  authenticator.use(
    new LocalStrategy({ usernameField: 'email', session: false }, (email, password, done) => {
      void (async () => {
        const found = await findAccountByEmail(database.knex, email);
        const isRight = await isPasswordRight(found?.passwordHash ?? null, password);
        return found !== null && isRight ? found : false;
      })().then((account) => done(null, account), done);
    }),
  );
  authenticator.serializeUser<StoredUser>((account, done) => {
    done(null, { id: account.id, credentialVersion: account.credentialVersion });
  });
  authenticator.deserializeUser<StoredUser>((stored, done) => {
    // A session from before a change of password names an older count, even if it was written again since.
    findAccount(database.knex, stored.id).then(
      (account) => done(null, account?.credentialVersion === stored.credentialVersion ? account : false),
      done,
    );
  });
  return authenticator;
}
