import type { Decorations, Tone } from './decorations.ts';
import { elementKey, noDecorations } from './decorations.ts';
import type { Finding } from '../engine/rules/finding.ts';

const collect = <T>(findings: readonly Finding[], pick: (finding: Finding) => T | undefined): readonly T[] =>
  findings.flatMap((finding) => pick(finding) ?? []);

/** Each tunnel that is down or marked by a finding is cut once, with the VNIs where they are the reason. */
const cutsOf = (findings: readonly Finding[], down: readonly string[]): Decorations['cuts'] => {
  const cuts = new Map<string, Decorations['cuts'][number]>(down.map((tunnel) => [tunnel, { tunnel }]));
  findings.forEach(({ mark }, i) => {
    if (mark?.kind !== 'cut') return;
    if (mark.vnis !== undefined || cuts.get(mark.tunnel)?.balloon === undefined)
      cuts.set(mark.tunnel, { tunnel: mark.tunnel, vnis: mark.vnis, balloon: i + 1 });
  });
  return [...cuts.values()];
};

const portsAtFault = (findings: readonly Finding[]): { readonly [key: string]: readonly Tone[] } =>
  Object.fromEntries(
    findings
      .filter((finding) => finding.severity === 'blocking')
      .flatMap((finding) => finding.elements.filter((ref) => ref.port !== undefined))
      .map((ref) => [elementKey(ref), ['fault']]),
  );

/**
 * How findings show on the sheet: a balloon for each that is blocking or degrading, and for the selected one whatever its
 * severity; words only beside the blocking; and the faults that can be drawn, drawn. `down` are the tunnels that can't come
 * up, whatever the reason. Numbers are those of the list. What is waived keeps its mark, muted, and asks for nothing: no
 * words, no port at fault, no missing cable to accept.
 */
export const findingsToDecorations = (
  findings: readonly Finding[],
  down: readonly string[],
  selectedKey?: string,
  isWaived: (key: string) => boolean = () => false,
): Decorations => ({
  ...noDecorations,
  tones: portsAtFault(findings.filter(({ key }) => !isWaived(key))),
  cuts: cutsOf(findings, down),
  loops: collect(findings, ({ mark }) => (mark?.kind === 'loop' ? { steps: mark.steps } : undefined)),
  ghosts: collect(findings, ({ mark, key }) =>
    mark?.kind === 'ghost' && !isWaived(key)
      ? { id: key, from: mark.from, to: mark.to, label: mark.label }
      : undefined,
  ),
  overhangs: findings.flatMap(({ mark }, i) =>
    mark?.kind === 'overhang'
      ? [
          {
            tunnel: mark.tunnel,
            end: mark.end,
            packetBytes: mark.packetBytes,
            mtuBytes: mark.mtuBytes,
            balloon: i + 1,
          },
        ]
      : [],
  ),
  balloons: findings.flatMap((finding, i) => {
    const at = finding.elements[0];
    if (at === undefined || (finding.severity === 'advisory' && finding.key !== selectedKey)) return [];
    return [
      {
        number: i + 1,
        severity: finding.severity,
        waived: isWaived(finding.key),
        at,
        ...((finding.severity === 'blocking' && !isWaived(finding.key)) || finding.key === selectedKey
          ? { words: finding.words }
          : {}),
      },
    ];
  }),
});
