import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Design } from '#engine/model/design.ts';
import { applyPatch, inversePatch } from '#engine/model/merge-patch.ts';
import { associationStates, tunnelStates } from '#engine/network/can-come-up.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import { compareFindings } from '#engine/rules/finding.ts';
import { countBySeverity, runRules } from '#engine/rules/run-rules.ts';
import { chainDesign, hubDesign, meshDesign, pairDesign } from '../../support/designs.ts';
import { faults } from '../../support/faults.ts';

const sound: { readonly [name: string]: Design } = {
  'a pair of sites': pairDesign(),
  'a pair with three segments': pairDesign({ segments: ['a', 'b', 'c'], hostsPerSite: 2 }),
  'a hub of four': hubDesign(4),
  'a hub on an HA pair': hubDesign(3, { hub: 'ha-pair', segments: ['a', 'b'] }),
  'a chain of five': chainDesign(5),
  'a full mesh whose tunnels are isolated from each other': meshDesign(4, { join: { isolation: 'mesh' } }),
};

describe('runRules', { timeout: 60_000 }, () => {
  it.each(Object.entries(sound))('finds nothing in %s', (_name, design) => {
    expect(runRules(design).map((finding) => finding.sentence)).toEqual([]);
  });

  it('does not complain of lifetimes that differ, since each end keeps its own', () => {
    const design = applyPatch(pairDesign(), {
      associations: { 'as-s0-s1': { a: { ikeLifetimeSeconds: 3600, childLifetimeSeconds: 900 } } },
    });
    expect(runRules(design)).toEqual([]);
  });

  it('sorts by severity, then rule, then key, and counts', () => {
    const findings = runRules(faulty);
    expect(findings.length).toBeGreaterThan(4);
    expect([...findings].sort(compareFindings)).toEqual(findings);
    const counts = countBySeverity(findings);
    expect(counts.blocking + counts.degrading + counts.advisory).toBe(findings.length);
    expect(counts.blocking).toBeGreaterThan(0);
    expect(counts.degrading).toBeGreaterThan(0);
    expect(counts.advisory).toBeGreaterThan(0);
  });

  it('keeps the keys of findings whose values change, and changes their fingerprint', () => {
    const [before] = runRules(vnis(10_120, 10_210));
    const [after] = runRules(vnis(10_120, 10_211));
    const [renamed] = runRules(
      applyPatch(vnis(10_120, 10_210), { sites: { s1: { name: 'Gullhaven pier' } } }),
    );
    expect(after!.key).toBe(before!.key);
    expect(after!.fingerprint).not.toBe(before!.fingerprint);
    expect(renamed!.sentence).not.toBe(before!.sentence);
    expect(renamed!.fingerprint).toBe(before!.fingerprint);
  });

  it('answers the same from memory as afresh, after any sequence of edits', () => {
    fc.assert(
      fc.property(fc.array(fc.nat(faults.length - 1), { minLength: 1, maxLength: 8 }), (picks) => {
        let design: Design = pairDesign({ segments: ['a', 'b'] });
        for (const pick of picks) {
          const patch = faults[pick]!;
          const undo = inversePatch(design, patch);
          const edited = applyPatch(design, patch);
          runRules(design);
          expect(runRules(edited)).toEqual(runRules(structuredClone(edited)));
          expect(runRules(applyPatch(edited, undo))).toEqual(runRules(structuredClone(design)));
          design = edited;
        }
      }),
      { numRuns: 30 },
    );
  });

  it.each([
    'sites',
    'devices',
    'transports',
    'endpoints',
    'associations',
    'tunnels',
    'forwarders',
    'segments',
  ] as const)('tells the new names after a change of names in %s alone', (collection) => {
    for (const fault of faults) {
      const design = applyPatch<Design>(pairDesign({ segments: ['a', 'b'] }), fault);
      runRules(design);
      const renamed = applyPatch(design, {
        [collection]: Object.fromEntries(
          Object.entries(design[collection]).map(([id, { name }]) => [id, { name: `${name} anew` }]),
        ),
      });
      expect(runRules(renamed)).toEqual(runRules(structuredClone(renamed)));
    }
  });

  it('names every tunnel and association that can’t come up in a blocking finding', () => {
    fc.assert(
      fc.property(fc.uniqueArray(fc.nat(faults.length - 1), { minLength: 1, maxLength: 5 }), (picks) => {
        const design = picks.reduce<Design>(
          (at, pick) => applyPatch(at, faults[pick]!),
          pairDesign({ segments: ['a', 'b'] }),
        );
        const network = indexNetwork(design);
        const blamed = new Set(
          runRules(design)
            .filter(({ severity }) => severity === 'blocking')
            .flatMap(({ elements }) => elements.map(({ id }) => id)),
        );
        for (const [id, { up }] of associationStates(network)) if (!up) expect([...blamed]).toContain(id);
        for (const [id, { reasons }] of tunnelStates(network))
          if (reasons.some(({ code }) => code !== 'association-down'))
            expect(
              [id, ...(['a', 'b'] as const).map((end) => design.tunnels[id]![end].endpoint)].some((one) =>
                blamed.has(one),
              ),
              id,
            ).toBe(true);
      }),
      { numRuns: 60 },
    );
  });
});

const vnis = (a: number, b: number): Design =>
  applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { a: { vni: a }, b: { vni: b } } } });

const faulty = [0, 7, 9, 25, 26, 27, 29].reduce<Design>(
  (design, i) => applyPatch(design, faults[i]!),
  pairDesign({ segments: ['a', 'b'] }),
);
