import { describe, expect, it } from 'vitest';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { Network } from '#engine/network/network.ts';
import { noContext, type CheckContext } from '#engine/rules/check-context.ts';
import type { Rule } from '#engine/rules/define-rule.ts';
import { isInPart, isSaidInPart, partNames, placeOfFact, type Fact } from '#engine/rules/facts.ts';
import type { Finding, Mark, Severity } from '#engine/rules/finding.ts';
import { fixesFor } from '#engine/rules/fixes-for.ts';
import { rules } from '#engine/rules/index.ts';
import { runRules, runTheseRules } from '#engine/rules/run-rules.ts';
import { collections, type Collection, type Design, type ElementRef } from '#engine/model/design.ts';
import { applyPatch, inversePatch, type MergePatch } from '#engine/model/merge-patch.ts';
import { parseDesign } from '#engine/model/parse-design.ts';

export interface ExpectedFinding {
  readonly sentence: string;
  readonly words?: string;
  readonly severity?: Severity;
  /** All elements as `collection/id` or `devices/id/port`, in order. */
  readonly elements?: readonly string[];
  /** All marked fields as `collection/id: path.to.field`. */
  readonly properties?: readonly string[];
  readonly mark?: Mark;
  /** Labels of everything that is offered, in order. */
  readonly fixes: readonly string[];
}
export interface RuleCases {
  readonly context?: CheckContext;
  readonly accepted: { readonly [sentence: string]: Design };
  readonly rejected: {
    readonly [sentence: string]: {
      readonly design: Design;
      readonly context?: CheckContext;
      readonly findings: readonly ExpectedFinding[];
    };
  };
}

const freezeDeep = <T>(value: T): T => {
  if (typeof value === 'object' && value !== null && !Object.isFrozen(value)) {
    Object.freeze(value);
    Object.values(value).forEach(freezeDeep);
  }
  return value;
};

/** The same document with the keys of every object the other way round. */
const reversed = <T>(value: T): T => {
  if (Array.isArray(value)) return value.map(reversed) as T;
  if (typeof value !== 'object' || value === null) return value;
  return Object.fromEntries(
    Object.entries(value)
      .reverse()
      .map(([key, item]) => [key, reversed(item)]),
  ) as T;
};

const refText = (ref: ElementRef): string =>
  [ref.collection, ref.id, ref.port, ref.member].filter((part) => part !== undefined).join('/');

const summary = (finding: Finding, expected: ExpectedFinding, fixes: readonly string[]): ExpectedFinding => ({
  sentence: finding.sentence,
  fixes,
  ...(expected.words === undefined ? {} : { words: finding.words }),
  ...(expected.severity === undefined ? {} : { severity: finding.severity }),
  ...(expected.elements === undefined ? {} : { elements: finding.elements.map(refText) }),
  ...(expected.properties === undefined
    ? {}
    : { properties: finding.properties.map(({ ref, path }) => `${refText(ref)}: ${path.join('.')}`) }),
  ...(expected.mark === undefined ? {} : { mark: finding.mark }),
});

const entryOf = (design: Design, ref: ElementRef): unknown => {
  const entry = (design[ref.collection] as { readonly [id: string]: unknown })[ref.id];
  if (ref.port === undefined) return entry;
  return design.devices[ref.id]?.ports[ref.port];
};

const expectWellFormed = (rule: Rule, design: Design, findings: readonly Finding[]): void => {
  expect(new Set(findings.map((finding) => finding.key)).size, 'keys are unique').toBe(findings.length);
  for (const finding of findings) {
    expect(JSON.parse(JSON.stringify(finding)), 'survives JSON').toEqual(finding);
    expect(finding.rule).toBe(rule.id);
    expect(finding.key.startsWith(`${rule.id} `), `key ${finding.key}`).toBe(true);
    expect(finding.sentence, 'a sentence in sentence case without a final stop').toMatch(
      /^[^a-z].*[^.]$|^[a-z0-9]+[-_.0-9].*[^.]$/,
    );
    expect(finding.words, 'two or three words').toMatch(/^\S+ \S+( \S+)?$/);
    expect(finding.elements.length).toBeGreaterThan(0);
    for (const ref of finding.elements) expect(entryOf(design, ref), `${refText(ref)} exists`).toBeDefined();
    for (const { ref, path } of finding.properties) {
      expect(entryOf(design, ref), `${refText(ref)} exists`).toBeDefined();
      expect(path.length).toBeGreaterThan(0);
    }
  }
};

/** A design with a change, which must leave it valid: the tests' own designs are held to that. */
export const changed = (design: Design, ...patches: readonly MergePatch[]): Design => {
  const parsed = parseDesign(patches.reduce<Design>(applyPatch, design));
  if (!parsed.ok)
    throw new Error(parsed.problems.map((p) => `${p.path}: ${p.value}, ${p.expected}`).join('\n'));
  return parsed.value;
};

/** From which facts each list of the index comes. */
const sourcesOfIndex: { readonly [F in Exclude<keyof Network, 'design'>]: readonly Fact[] } = {
  // A list of ids: those that are looked into count.
  deviceIds: [],
  tunnelIds: ['tunnels'],
  devicesBySite: ['devices'],
  hostsBySegment: ['hosts'],
  cablesByPort: ['cables'],
  cablesByDevice: ['cables'],
  landingsByDevice: ['landings'],
  landingsByPort: ['landings'],
  landingsByTransport: ['landings'],
  endpointsByDevice: ['endpoints'],
  tunnelsByEndpoint: ['tunnels'],
  tunnelsByAssociation: ['tunnels'],
  tunnelsByDevice: ['tunnels', 'endpoints'],
  associationsByDevice: ['associations'],
  forwardersByDevice: ['forwarders'],
  circuitsByForwarder: ['forwarders'],
  circuitsByTunnel: ['forwarders'],
  circuitsByPort: ['forwarders'],
  circuitsByPortVlan: ['forwarders'],
  segmentsBySiteVlan: ['addressing'],
  portGroupsByDevice: ['devices', 'cables'],
  bundles: ['devices', 'cables'],
  bundleByCable: ['devices', 'cables'],
  firstTunnelElement: [],
};

interface Watched {
  readonly collection: object;
  /** By id: the properties that were read; none where an entry was listed but not looked into. */
  readonly seen: ReadonlyMap<string, ReadonlySet<string>>;
}

/** A collection that keeps account of what is read of it. */
const watched = (collection: object): Watched => {
  const seen = new Map<string, Set<string>>();
  const entries = new Map<string, object>();
  const at = (id: string): Set<string> => {
    const known = seen.get(id) ?? new Set();
    seen.set(id, known);
    return known;
  };
  const proxy = new Proxy(collection, {
    ownKeys: (target) => {
      Object.keys(target).forEach(at);
      return Reflect.ownKeys(target);
    },
    get: (target, key) => {
      const entry: unknown = Reflect.get(target, key);
      if (typeof key !== 'string' || typeof entry !== 'object' || entry === null) return entry;
      at(key);
      const known =
        entries.get(key) ??
        new Proxy(entry, {
          get: (own, property) => {
            if (typeof property === 'string') at(key).add(property);
            return Reflect.get(own, property) as unknown;
          },
          ownKeys: (own) => {
            Object.keys(own).forEach((property) => at(key).add(property));
            return Reflect.ownKeys(own);
          },
        });
      entries.set(key, known);
      return known;
    },
  });
  return { collection: proxy, seen };
};

/** What a rule's check reads in a design beyond what it says it looks at. */
const factsUnnamed = (rule: Rule, given: Design, context: CheckContext): readonly string[] => {
  const network = indexNetwork(given);
  const unnamed = new Set<string>();
  const isNamed = (fact: Fact): boolean => rule.facts.includes(fact);
  const note = (...facts: readonly Fact[]): void => {
    for (const fact of facts) if (!isNamed(fact) && !isNamed(placeOfFact(fact))) unnamed.add(fact);
  };
  const divided = new Map<Collection, Watched>();
  for (const name of partNames) {
    const collection = placeOfFact(name) as Collection;
    // A copy: a proxy of something frozen has to give what is really there.
    if (!divided.has(collection)) divided.set(collection, watched({ ...network.design[collection] }));
  }
  const design = new Proxy(
    { ...network.design },
    {
      get: (target, key) => {
        const known = divided.get(key as Collection);
        if (known !== undefined) return known.collection;
        if (key === 'meta' || (collections as readonly PropertyKey[]).includes(key)) note(key as Fact);
        return Reflect.get(target, key) as unknown;
      },
    },
  );
  const watchedNetwork = new Proxy(
    { ...network, design },
    {
      get: (target, key) => {
        note(...(sourcesOfIndex[key as keyof typeof sourcesOfIndex] ?? []));
        return Reflect.get(target, key) as unknown;
      },
    },
  );
  rule.check(watchedNetwork, context);
  for (const [collection, { seen }] of divided)
    for (const [id, properties] of seen) {
      // Asked for its kind alone an entry is only passed over: while the kind stays, what else it says makes no difference.
      if (isNamed(collection) || (properties.size === 1 && properties.has('kind'))) continue;
      const entry = network.design[collection][id];
      if (entry === undefined) continue;
      const named = partNames.filter(
        (name) => isNamed(name) && placeOfFact(name) === collection && isInPart(name, network, id, entry),
      );
      if (named.length === 0) unnamed.add(`${collection}/${id}`);
      else
        for (const property of properties)
          if (!named.some((name) => isSaidInPart(name, property)))
            unnamed.add(`${property} of ${collection}/${id}`);
    }
  return [...unnamed].sort();
};

/** What a fresh copy gives: nothing of it is in any memory. */
const fresh = (design: Design): Design => freezeDeep(structuredClone(design));

const expectCure = (design: Design, finding: Finding, context: CheckContext): readonly string[] => {
  const blocking = (findings: readonly Finding[]): string[] =>
    findings.filter((other) => other.severity === 'blocking').map((other) => other.key);
  const before = blocking(runRules(design, context));
  const fixes = fixesFor(design, finding, context);
  expect(new Set(fixes.map((fix) => fix.id)).size, 'ids of fixes are unique').toBe(fixes.length);
  for (const fix of fixes) {
    const patched = applyPatch(design, fix.patch);
    expect(parseDesign(patched), `${fix.label}: a valid design`).toMatchObject({ ok: true });
    const after = runRules(fresh(patched), context);
    expect(
      after.map((other) => other.key),
      `${fix.label}: the finding is gone`,
    ).not.toContain(finding.key);
    expect(before, `${fix.label}: nothing new blocks`).toEqual(expect.arrayContaining(blocking(after)));
    expect(runRules(patched, context), `${fix.label}: memory and a fresh run agree`).toEqual(after);
    expect(applyPatch(patched, inversePatch(design, fix.patch)), `${fix.label}: can be undone`).toEqual(
      design,
    );
    expect(fix.sentence, `${fix.label}: a whole sentence`).toMatch(/^[A-Z].*\.$/);
  }
  return fixes.map((fix) => fix.label);
};

/**
 * Runs a rule over accepted and rejected designs. Unasked it also checks that the design was not changed, that a second
 * run and one on a design with its keys in another order agree, that the check reads no collection it does not name, that memory never
 * gives a stale answer after a fix, and
 * that every fix applies, cures, adds nothing that blocks and can be undone.
 */
export const testRule = (rule: Rule, cases: RuleCases): void => {
  describe(rule.id, () => {
    it('stands in the catalogue', () => {
      expect(rules).toContain(rule);
    });

    for (const [sentence, given] of Object.entries(cases.accepted))
      it(`accepts ${sentence}`, () => {
        const found = runTheseRules([rule], fresh(given), cases.context);
        expect(found.map((finding) => finding.sentence)).toEqual([]);
      });

    for (const [sentence, { design: given, findings: expected, ...rest }] of Object.entries(cases.rejected))
      it(`finds ${sentence}`, () => {
        const context = rest.context ?? cases.context ?? noContext;
        const design = fresh(given);
        const found = runTheseRules([rule], design, context);
        expectWellFormed(rule, design, found);
        expect(runTheseRules([rule], fresh(design), context), 'a second run agrees').toEqual(found);
        expect(
          runTheseRules([rule], freezeDeep(reversed(design)), context),
          'the order of keys does not matter',
        ).toEqual(found);
        expect(factsUnnamed(rule, fresh(given), context), 'looksAt names all that is read').toEqual([]);
        const fixes = found.map((finding) => expectCure(design, finding, context));
        expect(
          found.map((finding, i) => summary(finding, expected[i] ?? { sentence: '', fixes: [] }, fixes[i]!)),
        ).toEqual(expected);
      });
  });
};
