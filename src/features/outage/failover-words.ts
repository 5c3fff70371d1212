import type { Design } from '../../engine/model/design.ts';
import type {
  AssociationRecovery,
  Failover,
  FailoverPart,
  LeftBehind,
} from '../../engine/outage/failovers.ts';
import { durationText } from '../../lib/figure-texts.ts';
import { missingWords } from '../../workspace/operations/missing-words.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

const fates: Readonly<Record<AssociationRecovery['fate'], string>> = {
  kept: 'kept with its keys',
  renewed: 'made anew',
  lost: 'lost until the member is back',
  unknown: 'not known',
};

const parts: Readonly<Record<FailoverPart['what'], string>> = {
  takeover: 'takeover',
  detection: 'the far end notices',
  'key-exchange': 'new keys',
};

const reasons: Readonly<Record<LeftBehind['because'], string>> = {
  'endpoint-of-member': 'belongs to the member',
  'landing-of-member': 'plugged into the member only',
  'cabled-to-member': 'cabled to the member only',
};

/** How long until frames pass again, from the timers of the design. */
export const takesWords = ({ totalUs }: Failover): string =>
  totalUs === undefined ? 'not known' : durationText(totalUs);

export const movesWords = (design: Design, { moves }: Failover): string =>
  moves.map((ref) => nameOf(design, ref)).join(', ') || 'nothing';

export const leftBehindWords = (design: Design, { leftBehind }: Failover): string =>
  leftBehind.map(({ ref, because }) => `${nameOf(design, ref)} (${reasons[because]})`).join(', ');

const partWords = (design: Design, part: FailoverPart): string =>
  part.us === undefined
    ? `${parts[part.what]} not known (${part.missing.map((one) => missingWords(design, one)).join(', ') || 'no way is left'})`
    : `${parts[part.what]} ${durationText(part.us)}`;

/** Of each association its fate, how long it takes and what that is made of. */
export const associationWords = (design: Design, { recoveries }: Failover): readonly string[] =>
  recoveries.map(({ association, fate, parts: steps, totalUs }) => {
    const name = nameOf(design, { collection: 'associations', id: association });
    const total = totalUs === undefined ? '' : ` after ${durationText(totalUs)}`;
    const detail =
      steps.length === 0 || (fate === 'kept' && totalUs !== undefined)
        ? ''
        : `: ${steps.map((step) => partWords(design, step)).join(', ')}`;
    return `${name} ${fates[fate]}${total}${detail}`;
  });
