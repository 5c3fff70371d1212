import { AsyncLocalStorage } from 'node:async_hooks';
import type { TokenScope } from '#contract/account.ts';

/** What the token of a request leaves of its owner's rights. */
export interface TokenLimits {
  readonly tokenId: string;
  readonly scope: TokenScope;
  /** Null: every workspace of its owner. */
  readonly workspaceId: string | null;
}

declare global {
  // Express's own place for what a middleware found out.
  // eslint-disable-next-line @typescript-eslint/no-namespace
  namespace Express {
    interface Request {
      /** Set where the request carries a personal token in place of a session. */
      tokenLimits?: TokenLimits;
    }
  }
}

const limitsOfRequest = new AsyncLocalStorage<TokenLimits | undefined>();

/** Does work under a token's limits, or under none: whatever it asks `authorise`, however deep inside, is held to them. */
export function withinTokenLimits<T>(limits: TokenLimits | undefined, work: () => T): T {
  return limitsOfRequest.run(limits, work);
}

/** The limits of the request that is being answered, if it came with a token. */
export function tokenLimits(): TokenLimits | undefined {
  return limitsOfRequest.getStore();
}
