import { SelectCell } from '../../components/field-cells.tsx';
import type { Revision, Sitting } from '../../contract/revisions.ts';
import { dateAndTime } from '../../lib/format-time.ts';
import { writePoint, type HistoryPoint } from './history-point.ts';

interface PointSelectProps {
  readonly label: string;
  readonly value: HistoryPoint | undefined;
  readonly revisions: readonly Revision[];
  readonly sittings: readonly Sitting[];
  readonly onChange: (value: string) => void;
}

/** Chooses a moment of a design: now, one of its revisions, the end of a sitting, or its beginning. */
export function PointSelect({ label, value, revisions, sittings, onChange }: PointSelectProps) {
  const options = [
    { value: 'now', label: 'Now' },
    ...revisions.map((revision) => ({
      value: writePoint({ kind: 'revision', label: revision.label }),
      label: `Revision ${revision.label}`,
    })),
    ...sittings.map(({ lastSequence, until, by }) => ({
      value: writePoint({ kind: 'patch', sequence: lastSequence }),
      label: `${dateAndTime(new Date(until))}, ${by ?? 'somebody'}`,
    })),
    { value: 'patch-0', label: 'The beginning' },
  ];
  const current = value === undefined ? '' : writePoint(value);
  // A link may lead into the middle of a sitting.
  const shown =
    current === '' || options.some((option) => option.value === current)
      ? options
      : [...options, { value: current, label: `After edit ${current.slice('patch-'.length)}` }];
  return (
    <SelectCell
      label={label}
      value={current}
      options={shown}
      placeholder="Choose a moment"
      onChange={onChange}
    />
  );
}
