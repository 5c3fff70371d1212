import type { Route } from '../../auth/permissions.ts';
import { accountOperations, sessionOperations } from './account-operations.ts';
import { designOperations, reviewOperations } from './design-operations.ts';
import { engineOperations } from './engine-operations.ts';
import type { Operation, Operations } from './operation.ts';
import { engagementOperations, workspaceOperations } from './workspace-operations.ts';

/** Operations by what they are about, in the order in which people read of them. */
export const topics = {
  Engagements: engagementOperations,
  Designs: designOperations,
  Review: reviewOperations,
  Workspace: workspaceOperations,
  Engine: engineOperations,
  Account: accountOperations,
  'Signing in': sessionOperations,
} as const;
export type Topic = keyof typeof topics;

/** What every route takes and answers; one that is described nowhere does not compile. */
export const operations: Operations = {
  ...engagementOperations,
  ...designOperations,
  ...reviewOperations,
  ...workspaceOperations,
  ...engineOperations,
  ...accountOperations,
  ...sessionOperations,
};

/** All operations with their topics. */
export const operationsByTopic: readonly {
  readonly topic: Topic;
  readonly route: Route;
  readonly operation: Operation;
}[] = (Object.keys(topics) as Topic[]).flatMap((topic) =>
  (Object.keys(topics[topic]) as Route[]).map((route) => ({ topic, route, operation: operations[route] })),
);
