import { CellGrid } from '../../components/cell.tsx';
import { ChoiceCell, SelectCell } from '../../components/field-cells.tsx';
import type { Design } from '../../engine/model/design.ts';
import type { WaiverChoice, FindingFilter } from './filter-findings.ts';
import type { Grouping } from './group-findings.ts';

interface ChecksFilterProps {
  readonly filter: FindingFilter;
  readonly grouping: Grouping;
  /** Sets values of the address by name; '' takes one out. */
  readonly change: (values: Readonly<Record<string, string>>) => void;
  readonly design: Design;
  /** The checks that found something, or are asked for. */
  readonly rules: readonly { readonly id: string; readonly title: string }[];
}

const groupingOptions: readonly { readonly value: Grouping; readonly label: string }[] = [
  { value: 'severity', label: 'Severity' },
  { value: 'element', label: 'Element' },
  { value: 'rule', label: 'Check' },
];
const waiverOptions: readonly { readonly value: WaiverChoice; readonly label: string }[] = [
  { value: 'all', label: 'All' },
  { value: 'open', label: 'Open' },
  { value: 'waived', label: 'Waived' },
];

const byName = (a: { readonly label: string }, b: { readonly label: string }): number =>
  a.label.localeCompare(b.label);

/** What of the findings is shown, and in which groups. */
export function ChecksFilter({ filter, grouping, change, design, rules }: ChecksFilterProps) {
  const sites = Object.entries(design.sites).map(([value, { name }]) => ({ value, label: name }));
  const segments = Object.entries(design.segments).map(([value, { letter, name }]) => ({
    value,
    label: `${letter} ${name}`,
  }));
  return (
    <CellGrid columns="repeat(auto-fit, minmax(190px, 1fr))" className="mb-14">
      <ChoiceCell
        label="Grouped by"
        value={grouping}
        options={groupingOptions}
        onChange={(value) => change({ group: value === 'severity' ? '' : value })}
      />
      <ChoiceCell
        label="Waivers"
        value={filter.waivers}
        options={waiverOptions}
        onChange={(value) => change({ waivers: value === 'all' ? '' : value })}
      />
      <SelectCell
        label="Site"
        value={filter.site}
        options={sites.sort(byName)}
        placeholder="Any site"
        onChange={(site) => change({ site })}
        onClear={() => change({ site: '' })}
      />
      <SelectCell
        label="Segment"
        value={filter.segment}
        options={segments.sort(byName)}
        placeholder="Any segment"
        onChange={(segment) => change({ segment })}
        onClear={() => change({ segment: '' })}
      />
      <SelectCell
        label="Check"
        value={filter.rule}
        options={rules.map(({ id, title }) => ({ value: id, label: title })).sort(byName)}
        placeholder="Any check"
        onChange={(rule) => change({ rule })}
        onClear={() => change({ rule: '' })}
      />
    </CellGrid>
  );
}
