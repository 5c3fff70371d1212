import type { Collection, ElementRef } from '../model/design.ts';
import type { Network } from '../network/network.ts';
import type { CheckContext } from './check-context.ts';
import type { Fact } from './facts.ts';
import { placeOfFact } from './facts.ts';
import type { Finding, Fix, JsonValue, Mark, PropertyRef, Severity, Source } from './finding.ts';
import { fingerprintOf } from './fingerprint.ts';

/** One way in which a rule's fault is put into words. */
export interface Message<Values> {
  /** Two or three words for the sheet's balloon. */
  readonly words: string;
  /** One sentence in the design's own names and values, without a final stop. */
  readonly sentence: (values: Values) => string;
  /** Where this fault hurts in another way than the rule says. */
  readonly why?: string;
  readonly seen?: string;
}
type Messages = { readonly [name: string]: Message<never> };
type JsonRecord = { readonly [name: string]: JsonValue };

/** What every fault says about itself beside its message. */
export interface FaultBody {
  /** The first is where the balloon points. Together with the rule's id they make the finding's key. */
  readonly elements: readonly ElementRef[];
  /** Ids that make the key instead of the elements: where one element can have several faults, or the elements vary. */
  readonly identity?: readonly string[];
  /** Values that make it another fault when they change: numbers, addresses, ids; never names. */
  readonly basis?: readonly JsonValue[];
  readonly properties?: readonly PropertyRef[];
  readonly severity?: Severity;
  readonly severityReason?: string;
  readonly sources?: readonly Source[];
  readonly mark?: Mark;
}

/** A fault as a rule's check states it: one of the rule's messages with the values it needs. */
export type Fault<M extends Messages> = {
  [K in keyof M & string]: FaultBody & {
    readonly message: K;
    readonly values: Parameters<M[K]['sentence']>[0] & JsonRecord;
  };
}[keyof M & string];

export interface RuleDefinition<M extends Messages> {
  /** File name and, in camel case, export; the thing first. */
  readonly id: string;
  /** The good state. */
  readonly title: string;
  readonly severity: Severity;
  /** All that the check reads, names for its sentences included: while none of it is touched an earlier answer stands. */
  readonly looksAt: readonly [Fact, ...Fact[]];
  /** Why it hurts. */
  readonly why: string;
  /** What will be seen on site when the fault is real. */
  readonly seen: string;
  readonly sources: readonly [Source, ...Source[]];
  readonly messages: M;
  readonly check: (network: Network, context: CheckContext) => readonly Fault<NoInfer<M>>[];
  /** Changes that may cure a fault, the best first; each is tried before it is offered (see fixes-for.ts). */
  readonly fixes?: (fault: Fault<NoInfer<M>>, network: Network, context: CheckContext) => readonly Fix[];
}

/** What one of a rule's messages says without a design: the balloon's words, and what it says beyond its rule. */
export interface MessageWords {
  readonly id: string;
  readonly words: string;
  readonly why?: string;
  readonly seen?: string;
}

/** A rule as the catalogue holds it, its messages' types forgotten. */
export interface Rule {
  readonly id: string;
  readonly title: string;
  readonly severity: Severity;
  readonly facts: readonly Fact[];
  /** Where its facts stand in the document. */
  readonly looksAt: readonly ('meta' | Collection)[];
  readonly why: string;
  readonly seen: string;
  readonly sources: readonly Source[];
  readonly messages: readonly MessageWords[];
  readonly canFix: boolean;
  readonly check: (network: Network, context: CheckContext) => readonly Finding[];
  /** Untried changes for the finding of this key; none when the design no longer has it. */
  readonly proposals: (network: Network, context: CheckContext, key: string) => readonly Fix[];
}

const keyPart = (ref: ElementRef): string =>
  [ref.collection, ref.id, ref.port, ref.member].filter((part) => part !== undefined).join('/');

const keyOf = (rule: string, fault: FaultBody): string =>
  [rule, ...(fault.identity ?? fault.elements.map(keyPart).sort())].join(' ');

/** Makes a rule of its definition. */
export const defineRule = <const M extends Messages>(definition: RuleDefinition<M>): Rule => {
  const { id, title, severity, looksAt, why, seen, sources, messages } = definition;

  const findingOf = (fault: Fault<M>): Finding => {
    const message = messages[fault.message]!;
    const found = fault.severity ?? severity;
    return {
      key: keyOf(id, fault),
      rule: id,
      severity: found,
      ...(fault.severityReason === undefined ? {} : { severityReason: fault.severityReason }),
      sentence: message.sentence(fault.values as never),
      words: message.words,
      why: message.why ?? why,
      seen: message.seen ?? seen,
      sources: fault.sources ?? sources,
      elements: fault.elements,
      properties: fault.properties ?? [],
      values: fault.values,
      fingerprint: fingerprintOf(JSON.stringify([fault.message, found, ...(fault.basis ?? [])])),
      ...(fault.mark === undefined ? {} : { mark: fault.mark }),
    };
  };

  return {
    id,
    title,
    severity,
    facts: looksAt,
    looksAt: [...new Set(looksAt.map(placeOfFact))],
    why,
    seen,
    sources,
    messages: Object.entries<Message<never>>(messages).map(([name, message]) => ({
      id: name,
      words: message.words,
      ...(message.why === undefined ? {} : { why: message.why }),
      ...(message.seen === undefined ? {} : { seen: message.seen }),
    })),
    canFix: definition.fixes !== undefined,
    check: (network, context) => definition.check(network, context).map(findingOf),
    proposals: (network, context, key) => {
      const fault = definition.check(network, context).find((candidate) => keyOf(id, candidate) === key);
      return fault === undefined ? [] : (definition.fixes?.(fault, network, context) ?? []);
    },
  };
};
