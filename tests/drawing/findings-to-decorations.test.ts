import { describe, expect, it } from 'vitest';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { findingsToDecorations } from '#drawing/findings-to-decorations.ts';
import { meshDesign, pairDesign } from '../support/designs.ts';

const cutPair = applyPatch(pairDesign(), { tunnels: { 'tn-s0-s1-a': { b: { vni: 10_210 } } } });

describe('findings as decorations of the sheet', () => {
  it('cut a tunnel whose VNIs differ, with both numbers and a worded balloon', () => {
    const findings = runRules(cutPair);
    const { cuts, balloons } = findingsToDecorations(findings, ['tn-s0-s1-a']);
    expect(cuts).toEqual([{ tunnel: 'tn-s0-s1-a', vnis: { a: 10_000, b: 10_210 }, balloon: 1 }]);
    expect(balloons[0]).toMatchObject({ number: 1, severity: 'blocking', words: 'VNIs differ' });
  });

  it('cut a tunnel that cannot come up for another reason, without numbers', () => {
    expect(findingsToDecorations([], ['tn-x']).cuts).toEqual([{ tunnel: 'tn-x' }]);
  });

  it('send chevrons round a loop', () => {
    const { loops } = findingsToDecorations(runRules(meshDesign(3)), []);
    expect(loops).toHaveLength(1);
    expect(loops[0]!.steps).toHaveLength(3);
  });

  it('keep advisories off the sheet until they are selected', () => {
    const bare = applyPatch(pairDesign(), { transports: { coast: { mtu: null } } });
    const findings = runRules(bare).filter((finding) => finding.severity === 'advisory');
    expect(findings.length).toBeGreaterThan(0);
    expect(findingsToDecorations(findings, []).balloons).toEqual([]);
    expect(findingsToDecorations(findings, [], findings[0]!.key).balloons).toHaveLength(1);
  });

  it('mute what is waived: the balloon without words unless selected, no port at fault, nothing to accept', () => {
    const findings = runRules(cutPair);
    const { key } = findings[0]!;
    const isWaived = (asked: string) => asked === key;
    const [muted] = findingsToDecorations(findings, [], undefined, isWaived).balloons;
    expect(muted).toMatchObject({ number: 1, waived: true });
    expect(muted).not.toHaveProperty('words');
    expect(findingsToDecorations(findings, [], key, isWaived).balloons[0]).toHaveProperty('words');
    const ghost = {
      ...findings[0]!,
      elements: [{ collection: 'devices' as const, id: 'fw-s0', port: 'lan2' }],
      mark: {
        kind: 'ghost' as const,
        from: { device: 'fw-s0', port: 'lan2' },
        to: { device: 'fw-s1', port: 'lan2' },
        label: 'Second cable',
      },
    };
    expect(findingsToDecorations([ghost], [])).toMatchObject({
      ghosts: [{ id: key }],
      tones: { 'devices/fw-s0/lan2': ['fault'] },
    });
    const waived = findingsToDecorations([ghost], [], undefined, isWaived);
    expect([waived.ghosts, waived.tones]).toEqual([[], {}]);
  });
});
