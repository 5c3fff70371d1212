import connectPgSimple from 'connect-pg-simple';
import { csrfSync } from 'csrf-sync';
import type { Request, RequestHandler, Response } from 'express';
import session from 'express-session';
import passport from 'passport';
import { Strategy as LocalStrategy } from 'passport-local';
import type { Config } from '../config.ts';
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

interface StoredUser {
  readonly id: string;
  readonly credentialVersion: number;
}

const keptForMs = 30 * 24 * 60 * 60 * 1000;
const anonymousForMs = 2 * 60 * 60 * 1000;
const idleSeconds = 24 * 60 * 60;

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
        secret: config.sessionSecret,
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

/** Starts a new session for a person, under a new id: one that was planted before is worth nothing. */
export async function startSession(req: Request, account: Account, keep: boolean): Promise<void> {
  await new Promise<void>((resolve, reject) => {
    req.logIn(account, (error?: unknown) => (error ? reject(error as Error) : resolve()));
  });
  if (keep) req.session.cookie.maxAge = keptForMs;
  csrf.generateToken(req, true);
  await new Promise<void>((resolve, reject) => {
    req.session.save((error?: unknown) => (error ? reject(error as Error) : resolve()));
  });
}

/** Ends this session for good. */
export async function endSession(req: Request): Promise<void> {
  await new Promise<void>((resolve, reject) => {
    req.session.destroy((error?: unknown) => (error ? reject(error as Error) : resolve()));
  });
}

/** The token that changing requests must carry; a visitor's session is made for it, and short. */
export function csrfTokenOf(req: Request): string {
  if (req.user === undefined) req.session.cookie.maxAge = anonymousForMs;
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
