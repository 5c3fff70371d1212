import { describe, expect, test } from 'vitest';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { runRules } from '../../../src/engine/rules/run-rules.ts';
import { filterFindings, filterFrom } from '../../../src/features/findings/filter-findings.ts';
import { groupFindings } from '../../../src/features/findings/group-findings.ts';
import { demoDesign } from '../../../seeds/demo-designs/demo-design.ts';
import { pairDesign } from '../../support/designs.ts';

const design = demoDesign('planted-faults');
const findings = runRules(design);
const from = (values: Readonly<Record<string, string>>) => filterFrom((name) => values[name] ?? '');
const none = (): boolean => false;
const found = (values: Readonly<Record<string, string>>, isWaived: (key: string) => boolean = none) =>
  filterFindings(findings, from(values), design, isWaived);

describe('the filter of an address', () => {
  test('asks for nothing where it says nothing, or what no list has', () => {
    expect(found({})).toEqual(findings);
    expect(found({ severity: 'terrible', waivers: 'maybe' })).toEqual(findings);
  });

  test('narrows by severity and by check', () => {
    const blocking = found({ severity: 'blocking' });
    expect(blocking.length).toBeGreaterThan(0);
    expect(new Set(blocking.map(({ severity }) => severity))).toEqual(new Set(['blocking']));
    const [one] = found({ rule: 'tunnel-vni-mismatch' });
    expect(one?.rule).toBe('tunnel-vni-mismatch');
    expect(found({ severity: 'advisory', rule: 'tunnel-vni-mismatch' })).toEqual([]);
  });

  test('narrows to what is waived, and to what is not', () => {
    const [first] = findings;
    const isWaived = (key: string): boolean => key === first!.key;
    expect(found({ waivers: 'waived' }, isWaived)).toEqual([first]);
    expect(found({ waivers: 'open' }, isWaived)).toEqual(findings.slice(1));
  });

  test('finds every word, in sentences, names of elements, reasons and sources', () => {
    const [vni] = found({ rule: 'tunnel-vni-mismatch' });
    expect(found({ q: 'vni GULLHAVEN' })).toContain(vni);
    expect(found({ q: design.tunnels[vni!.elements[0]!.id]!.name })).toContain(vni);
    expect(found({ q: 'rfc 7348' })).toContain(vni);
    expect(found({ q: 'vni penguins' })).toEqual([]);
  });
});

describe('places', () => {
  const pair = applyPatch(pairDesign(), {
    tunnels: { 'tn-s0-s1-a': { b: { vni: 777 } } },
    transports: { coast: { mtu: null } },
  });
  const all = runRules(pair);
  const keysAt = (values: Readonly<Record<string, string>>) =>
    filterFindings(all, from(values), pair, none).map(({ rule }) => rule);

  test('a tunnel’s finding is at both its sites and on the segments that it carries', () => {
    for (const site of ['s0', 's1']) expect(keysAt({ site })).toContain('tunnel-vni-mismatch');
    expect(keysAt({ segment: 'a' })).toContain('tunnel-vni-mismatch');
  });

  test('what is at no site and on no segment is found under none', () => {
    const ofTransport = all.filter(({ elements }) =>
      elements.every((ref) => ref.collection === 'transports'),
    );
    expect(ofTransport.length).toBeGreaterThan(0);
    for (const { rule } of ofTransport) {
      expect(keysAt({ site: 's0' })).not.toContain(rule);
      expect(keysAt({ segment: 'a' })).not.toContain(rule);
    }
  });
});

describe('groups', () => {
  const titleOf = (rule: string): string => `The good state of ${rule}`;

  test('hold each finding once, the most severe group first', () => {
    for (const by of ['severity', 'element', 'rule'] as const) {
      const groups = groupFindings(findings, by, design, titleOf);
      expect(groups.flatMap((group) => group.findings)).toHaveLength(findings.length);
      expect(new Set(groups.map(({ key }) => key)).size).toBe(groups.length);
      expect(groups[0]!.findings[0]).toBe(findings[0]);
    }
  });

  test('are called by severity, by element with its kind, or by the check’s good state', () => {
    const [bySeverity] = groupFindings(findings, 'severity', design, titleOf);
    expect(bySeverity).toMatchObject({ key: 'blocking', title: 'Blocking' });
    const [byRule] = groupFindings(findings, 'rule', design, titleOf);
    expect(byRule).toMatchObject({ title: titleOf(findings[0]!.rule), detail: findings[0]!.rule });
    const vni = findings.filter(({ rule }) => rule === 'tunnel-vni-mismatch');
    const [byElement] = groupFindings(vni, 'element', design, titleOf);
    expect(byElement).toMatchObject({
      title: design.tunnels[vni[0]!.elements[0]!.id]!.name,
      detail: 'Tunnel',
    });
  });
});
