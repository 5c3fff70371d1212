import { CellGrid } from '../../components/cell.tsx';
import type { DeepReadonly } from '../../engine/model/design.ts';
import type { Selector } from '../../engine/model/overlay.ts';
import type { FieldPath } from './field-marks.ts';
import { TextField } from './fields.tsx';
import { OrderedList } from './ordered-list.tsx';
import { wholeNumber } from '../../lib/written-value.ts';

const port = wholeNumber();

/** What one end of an association lets into it. */
export function SelectorList({
  path,
  place,
  suggested,
}: {
  readonly path: FieldPath;
  readonly place: string;
  /** The loopbacks that the first selector is to take in. */
  readonly suggested: { readonly local: string; readonly remote: string };
}) {
  return (
    <OrderedList<DeepReadonly<Selector>>
      path={path}
      noun="selector"
      of={place}
      empty="not stated"
      titleOf={({ local, remote }) => `${local} to ${remote}`}
      fresh={[{ label: 'Add a selector', entry: () => suggested }]}
    >
      {(_selector, _id, at) => (
        <CellGrid>
          <TextField label="Local" place={place} path={[...at, 'local']} required />
          <TextField label="Remote" place={place} path={[...at, 'remote']} required />
          <TextField
            label="UDP port"
            place={place}
            path={[...at, 'udpPort']}
            writing={port}
            emptyWord="any"
          />
        </CellGrid>
      )}
    </OrderedList>
  );
}
