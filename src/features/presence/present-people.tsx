import { useEffect } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button } from '../../components/button.tsx';
import { Menu } from '../../components/menu.tsx';
import { PersonTag } from '../../components/person-tag.tsx';
import { designPath } from '../../lib/workspace-path.ts';
import { follow, usePresence } from '../../workspace/live/presence.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { peopleHere, whereWords, type PersonHere } from './people-here.ts';

const mostTags = 4;

/** Who else has the design open, each with where they are and a way to follow them. */
export function PresentPeople({ designId }: { readonly designId: string }) {
  const others = usePresence((state) => state.others);
  const followed = usePresence((state) => state.followed);
  const people = peopleHere(others);
  const leader = others.find(({ connectionId }) => connectionId === followed);
  useSamePage(designId, leader?.place.page);
  if (people.length === 0) return null;
  return (
    <ul aria-label="Also here" className="flex items-center gap-4 max-md:hidden">
      {people.slice(0, mostTags).map((person) => (
        <li key={person.personId}>
          <PersonMenu person={person} isFollowed={leader?.personId === person.personId} />
        </li>
      ))}
      {people.length > mostTags && (
        <li
          className="text-note text-ink-2"
          title={people
            .slice(mostTags)
            .map(({ name }) => name)
            .join(', ')}
        >
          and {people.length - mostTags} more
        </li>
      )}
      {leader !== undefined && (
        <li className="max-lg:hidden">
          <Button small onClick={() => follow(undefined)}>
            Stop following
          </Button>
        </li>
      )}
    </ul>
  );
}

function PersonMenu({ person, isFollowed }: { readonly person: PersonHere; readonly isFollowed: boolean }) {
  const where = useOpenState((state) => whereWords(person.place, state.document));
  const { connectionId, initials, name, isFollowable } = person;
  return (
    <Menu
      align="end"
      heading={
        <>
          <p className="text-value font-semibold text-ink">{name}</p>
          <p className="text-note text-ink-2">{where}</p>
        </>
      }
      groups={[
        {
          actions: [
            isFollowed
              ? { label: 'Stop following', onSelect: () => follow(undefined) }
              : {
                  label: 'Follow their view',
                  disabled: !isFollowable,
                  ...(isFollowable ? {} : { detail: 'follows somebody' }),
                  onSelect: () => follow(connectionId),
                },
          ],
        },
      ]}
      trigger={
        <button type="button" aria-label={`${name}, ${where}`} className="inline-flex">
          <PersonTag initials={initials} name={name} presence="other" />
        </button>
      }
    />
  );
}

/** Goes along when whoever is followed turns to another page of the design. */
function useSamePage(designId: string, page: string | undefined): void {
  const navigate = useNavigate();
  const here = usePresence((state) => state.page);
  useEffect(() => {
    if (page === undefined || page === usePresence.getState().page) return;
    void navigate(page === 'sheet' ? designPath(designId) : `${designPath(designId)}/${page}`);
  }, [page, designId, navigate]);
  useEffect(() => {
    // Whoever turns to another page themselves goes their own way.
    const { followed, others } = usePresence.getState();
    const leader = others.find(({ connectionId }) => connectionId === followed);
    if (leader !== undefined && leader.place.page !== here) follow(undefined);
  }, [here]);
}
