import { CellGrid } from '../../components/cell.tsx';
import { InputCell, SelectCell } from '../../components/field-cells.tsx';
import { activityActions, type ActivityPage } from '../../contract/activity.ts';
import { activityActionWords } from '../../contract/activity-words.ts';
import type { ActivityWish } from './activity-query.ts';

interface ActivityFiltersProps {
  readonly wish: ActivityWish;
  readonly people: ActivityPage['people'];
  readonly designs: ActivityPage['designs'];
  readonly onChange: (wish: Partial<ActivityWish>) => void;
}

const optionsOf = (choices: ActivityPage['people']) =>
  choices.map(({ id, name }) => ({ value: id, label: name }));

const actionOptions = activityActions.map((value) => ({ value, label: activityActionWords[value] }));

/** What of the activity is wanted. */
export function ActivityFilters({ wish, people, designs, onChange }: ActivityFiltersProps) {
  return (
    <CellGrid columns="repeat(auto-fit, minmax(140px, 1fr))">
      <SelectCell
        label="Person"
        value={wish.person}
        options={optionsOf(people)}
        placeholder="Everybody"
        onChange={(person) => onChange({ person })}
        onClear={() => onChange({ person: '' })}
      />
      <SelectCell
        label="What was done"
        value={wish.action}
        options={actionOptions}
        placeholder="Everything"
        onChange={(action) => onChange({ action })}
        onClear={() => onChange({ action: '' })}
      />
      <SelectCell
        label="Design"
        value={wish.design}
        options={optionsOf(designs)}
        placeholder="All"
        onChange={(design) => onChange({ design })}
        onClear={() => onChange({ design: '' })}
      />
      <InputCell
        label="From (UTC)"
        type="date"
        value={wish.from}
        onChange={(event) => onChange({ from: event.target.value })}
      />
      <InputCell
        label="Up to (UTC)"
        type="date"
        value={wish.to}
        onChange={(event) => onChange({ to: event.target.value })}
      />
    </CellGrid>
  );
}
