import { BarCell } from '../../components/bar.tsx';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import { useSuggesting } from '../../workspace/suggesting.tsx';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';

const edits = (count: number): string => (count === 1 ? '1 edit kept' : `${count} edits kept`);
const clock = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit' });

/** Whether the work is safe, always in sight. */
export function SaveCell() {
  const open = useOpenDesign();
  const save = useOpenState((state) => state.save);
  const editable = useOpenState((state) => state.editable);
  const { draft } = useSuggesting();
  if (draft !== undefined)
    return (
      <BarCell label="Suggesting" className="max-md:hidden">
        Not saved
      </BarCell>
    );
  // Refused edits stay in sight when the design's state is why.
  if (!editable && save.kind !== 'refused')
    return (
      <BarCell label="Access" className="max-md:hidden">
        Read only
      </BarCell>
    );
  return (
    <BarCell label={save.kind === 'saved' ? 'Saved' : 'Not saved yet'}>
      <span role="status" className="flex items-center gap-6">
        {save.kind === 'saved' && clock.format(save.at)}
        {save.kind === 'saving' && 'Saving'}
        {save.kind === 'offline' && (
          <span className="flex items-center gap-6 text-degr">
            <Icon name="cut-wave" />
            Offline, {edits(save.edits)}
          </span>
        )}
        {save.kind === 'signed-out' && <span className="text-degr">Signed out, {edits(save.edits)}</span>}
        {save.kind === 'refused' && <span className="text-red">Refused, {edits(save.edits)}</span>}
      </span>
      {save.kind === 'refused' && (
        <Menu
          trigger={
            <Button small kind="danger">
              Why
            </Button>
          }
          heading={
            <p className="max-w-320 px-12 py-8 text-base whitespace-normal">
              {save.message}
              {save.problems.slice(0, 4).map((problem) => (
                <span key={problem.path} className="mt-4 block">
                  {problem.path}: {problem.value}, {problem.expected}
                </span>
              ))}
            </p>
          }
          groups={[
            {
              actions: [
                { label: 'Try again', onSelect: () => void open.flush() },
                { label: 'Give up these edits', danger: true, onSelect: () => open.discardRefused() },
              ],
            },
          ]}
        />
      )}
    </BarCell>
  );
}
