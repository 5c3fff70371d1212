import type { Pin, Thread } from '../../contract/comments.ts';
import { elementKey } from '../../drawing/decorations.ts';
import type { ElementRef } from '../../engine/model/design.ts';

export const threadStates = ['open', 'resolved', 'all'] as const;
export type ThreadState = (typeof threadStates)[number];
export const threadCircles = ['', 'mine', 'mentions', 'suggestions'] as const;
export type ThreadCircle = (typeof threadCircles)[number];

export interface ThreadFilter {
  readonly state: ThreadState;
  /** Those that the reader wrote in, those that call the reader, those that suggest a change; '' for all. */
  readonly circle: ThreadCircle;
  /** Key of an element, 'design' for those about the whole design; '' for all. */
  readonly on: string;
}

export const threadFilterFrom = (valueOf: (name: string) => string): ThreadFilter => ({
  state: threadStates.find((each) => each === valueOf('threads')) ?? 'open',
  circle: threadCircles.find((each) => each === valueOf('whose')) ?? '',
  on: valueOf('on'),
});

/** The element that a thread is about, whatever it says of it. */
export const refOfPin = (pin: Pin): ElementRef | undefined =>
  pin.kind === 'design' ? undefined : (pin.ref ?? undefined);

/** What threads are told apart by: the element that they are about, or 'design'. */
export const placeOfPin = (pin: Pin): string => {
  const ref = refOfPin(pin);
  return ref === undefined ? 'design' : elementKey(ref);
};

const isInCircle = ({ comments }: Thread, circle: ThreadCircle, personId: string | undefined): boolean => {
  if (circle === 'mine') return comments.some(({ author }) => author?.id === personId);
  if (circle === 'mentions')
    return comments.some(({ mentions }) => mentions.some(({ id }) => id === personId));
  return circle === '' || comments.some(({ suggestion }) => suggestion !== null);
};

export const filterThreads = (
  threads: readonly Thread[],
  { state, circle, on }: ThreadFilter,
  personId: string | undefined,
): readonly Thread[] =>
  threads.filter(
    (thread) =>
      (state === 'all' || (thread.resolvedAt === null) === (state === 'open')) &&
      isInCircle(thread, circle, personId) &&
      (on === '' || placeOfPin(thread.pin) === on),
  );
