import { Button } from '../../components/button.tsx';
import { EmptyState } from '../../components/empty-state.tsx';

interface NoDemandsProps {
  /** How many segments land at two sites, so that a demand can be stated for them. */
  readonly segments: number;
  /** Absent for who may not edit. */
  readonly onAdd: (() => void) | undefined;
}

/** Load without a demand: what one is, and the quickest way to the first. */
export function NoDemands({ segments, onAdd }: NoDemandsProps) {
  return (
    <div className="flex h-full items-center justify-center p-14">
      <EmptyState
        className="w-full max-w-560"
        title="No demand is stated"
        action={
          onAdd !== undefined &&
          segments > 0 && (
            <Button kind="primary" onClick={onAdd}>
              {segments === 1
                ? 'Add a demand for the segment'
                : `Add a demand for each of ${segments} segments`}
            </Button>
          )
        }
      >
        A demand is traffic that a segment must carry between two places: its rate each way and the lengths of
        its packets. Load lays demands along their way, grown by VXLAN and IPsec, and tells which port,
        ordered rate or gateway runs full first.
        {segments === 0 && ' It needs a segment that lands at two sites.'}
      </EmptyState>
    </div>
  );
}
