import { Button } from '../../components/button.tsx';
import { EmptyState, UncabledPicture } from '../../components/empty-state.tsx';
import { Icon } from '../../components/icon.tsx';

interface NoEngagementsProps {
  /** There are some, but none fits the filter. */
  readonly filtered: boolean;
  readonly mayCreate: boolean;
  readonly onCreate: () => void;
  readonly onClearFilter: () => void;
}

/** In place of the rows: how to make the first one, or how to see the others again. */
export function NoEngagements({ filtered, mayCreate, onCreate, onClearFilter }: NoEngagementsProps) {
  if (filtered) {
    return (
      <EmptyState
        className="mt-2"
        title="Nothing fits"
        action={<Button onClick={onClearFilter}>Show all designs</Button>}
      >
        No design here has these words or this state.
      </EmptyState>
    );
  }
  return (
    <EmptyState
      className="mt-2"
      picture={<UncabledPicture />}
      title="No engagement yet"
      action={
        mayCreate && (
          <Button kind="primary" icon={<Icon name="plus" />} onClick={onCreate}>
            New engagement
          </Button>
        )
      }
    >
      {mayCreate
        ? 'An engagement is a piece of work for one customer. Make one, then draw its first design or begin with the demo.'
        : 'An engagement is a piece of work for one customer. An owner or an architect of this workspace can make the first.'}
    </EmptyState>
  );
}
