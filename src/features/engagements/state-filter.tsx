import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import { stampWords } from '../../components/stamp.tsx';
import type { Engagement } from '../../contract/designs.ts';
import { countByState, isDesignState, type DesignState } from './filter-engagements.ts';

interface StateFilterProps {
  readonly engagements: readonly Engagement[];
  readonly value: DesignState | null;
  readonly onChange: (state: DesignState | null) => void;
}

/** Which designs are shown: all, or those in one state. Only states that occur, and the one that is chosen. */
export function StateFilter({ engagements, value, onChange }: StateFilterProps) {
  const counts = countByState(engagements);
  const total = counts.reduce((sum, { count }) => sum + count, 0);
  const shown =
    counts.some(({ state }) => state === value) || value === null
      ? counts
      : [...counts, { state: value, count: 0 }];
  return (
    <SegmentedChoice
      label="Designs by state"
      value={value ?? 'all'}
      options={[
        { value: 'all', label: `All ${total}` },
        ...shown.map(({ state, count }) => ({ value: state, label: `${stampWords[state]} ${count}` })),
      ]}
      onChange={(chosen) => onChange(isDesignState(chosen) ? chosen : null)}
    />
  );
}
