import {
  espEncryptionLevels,
  espIntegrityLevels,
  espWithoutIntegrityLevels,
  ikeEncryptionLevels,
  ikeIntegrityLevels,
  ikePrfLevels,
  keyExchangeGroupLevels,
  type AlgorithmLevel,
} from '../reference/algorithm-levels.ts';
import { espTransforms } from '../reference/esp.ts';
import type { EspProposal, IkeProposal } from './algorithm-names.ts';
import type { Source } from './finding.ts';

/** One thing in a proposal that its standard advises against. */
export interface Weakness {
  readonly layer: 'ike' | 'esp';
  readonly part: 'encryption' | 'integrity' | 'no-integrity' | 'prf' | 'group';
  readonly algorithm: string;
  /** The proposal's field to be marked. */
  readonly field: string;
  /** Forbidden: must not. Fading: should not, or a must about to fall. Clear: allowed, but hides nothing. */
  readonly kind: 'forbidden' | 'fading' | 'clear';
  readonly sources: readonly Source[];
}

const kindOf = (level: AlgorithmLevel | undefined): 'forbidden' | 'fading' | undefined => {
  if (level === undefined) return undefined;
  if (level.level === 'must-not') return 'forbidden';
  return level.level === 'should-not' || level.trend === 'falling' ? 'fading' : undefined;
};

/** 'RFC 8221 section 5' as a source. */
const sourceOf = (text: string): Source => {
  const [, document, clause] = /^(RFC \d+) (.+)$/.exec(text) ?? [];
  return document === undefined || clause === undefined ? { document: text } : { document, clause };
};

/** What the standards advise against in one proposal; algorithms that they don't list count as neither good nor bad. */
export const weaknessesOf = (
  layer: 'ike' | 'esp',
  proposal: IkeProposal | EspProposal,
): readonly Weakness[] => {
  const found: Weakness[] = [];
  const judge = (
    part: Weakness['part'],
    algorithm: string | number,
    level: AlgorithmLevel | undefined,
    field: string = part,
  ): void => {
    const kind = kindOf(level);
    if (kind !== undefined)
      found.push({
        layer,
        part,
        algorithm: String(algorithm),
        field,
        kind,
        sources: [sourceOf(level!.source)],
      });
  };
  const { encryption, integrity, group } = proposal;
  judge('encryption', encryption, (layer === 'ike' ? ikeEncryptionLevels : espEncryptionLevels)[encryption]);
  if (integrity !== undefined)
    judge('integrity', integrity, (layer === 'ike' ? ikeIntegrityLevels : espIntegrityLevels)[integrity]);
  else if (layer === 'esp' && !espTransforms[encryption].aead)
    judge('no-integrity', encryption, espWithoutIntegrityLevels.besideOthers, 'integrity');
  const prf = 'prf' in proposal ? proposal.prf : undefined;
  if (prf !== undefined) judge('prf', prf, ikePrfLevels[prf]);
  if (group !== undefined) judge('group', group, keyExchangeGroupLevels[group]);
  if (layer === 'esp' && encryption === 'null' && integrity !== undefined)
    found.push({
      layer,
      part: 'encryption',
      algorithm: encryption,
      field: 'encryption',
      kind: 'clear',
      // RFC 2410 section 1: authentication and integrity without confidentiality.
      sources: [
        { document: 'RFC 2410', clause: 'section 1' },
        { document: 'RFC 7348', clause: 'section 7' },
      ],
    });
  return found;
};
