import { useReactFlow, useStore, useStoreApi, ViewportPortal } from '@xyflow/react';
import { useEffect, useMemo } from 'react';
import { useDrawn } from '../../canvas/geometry-context.tsx';
import { PersonTag } from '../../components/person-tag.tsx';
import { elementKey } from '../../drawing/decorations.ts';
import type { Point } from '../../drawing/geometry.ts';
import { anchorOf } from '../../drawing/routing/anchors.ts';
import { follow, setView, usePresence } from '../../workspace/live/presence.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';

const still = (): boolean => window.matchMedia('(prefers-reduced-motion: reduce)').matches;
const glideMs = 200;

/** Where others are on the sheet: their initials beside what they have selected, and their view while it is followed. */
export function PresenceOnSheet() {
  return (
    <>
      <FollowedView />
      <SaidView />
      <OthersMarks />
    </>
  );
}

interface Mark {
  readonly key: string;
  readonly at: Point;
  readonly people: readonly { readonly initials: string; readonly name: string }[];
}

function OthersMarks() {
  const others = usePresence((state) => state.others);
  const document = useOpenState((state) => state.document);
  const { settled } = useDrawn();
  const zoom = useStore((state) => state.transform[2]);
  const marks = useMemo(() => {
    const byElement = new Map<string, Mark>();
    for (const { place, initials, name } of others)
      for (const { collection, id, port, member } of place.selection) {
        const ref = {
          collection,
          id,
          ...(port === undefined ? {} : { port }),
          ...(member === undefined ? {} : { member }),
        };
        const at = anchorOf(settled, ref, document);
        if (at === undefined) continue;
        const key = elementKey(ref);
        const people = byElement.get(key)?.people ?? [];
        if (people.some((known) => known.name === name)) continue;
        byElement.set(key, { key, at, people: [...people, { initials, name }] });
      }
    return [...byElement.values()];
  }, [others, document, settled]);
  if (marks.length === 0) return null;
  return (
    <ViewportPortal>
      {marks.map(({ key, at, people }) => (
        <div
          key={key}
          className="pointer-events-none absolute flex gap-2"
          // As large on the screen at every zoom, above and right of what it belongs to.
          style={{
            transform: `translate(${at.x}px, ${at.y}px) scale(${1 / zoom}) translate(4px, -26px)`,
            transformOrigin: '0 0',
            // Over every part, of which the last drawn has no higher place.
            zIndex: 10_000,
          }}
        >
          {people.map(({ initials, name }) => (
            <PersonTag key={name} initials={initials} name={name} presence="other" />
          ))}
        </div>
      ))}
    </ViewportPortal>
  );
}

/** Tells others which part of the sheet is in view; nothing while following, since that view is another's. */
function SaidView() {
  const [x, y, zoom] = useStore((state) => state.transform);
  const width = useStore((state) => state.width);
  const height = useStore((state) => state.height);
  const followed = usePresence((state) => state.followed);
  useEffect(() => {
    if (width === 0 || height === 0 || followed !== undefined) return setView(null);
    const round = (value: number): number => Math.round(value);
    setView({
      x: round(-x / zoom),
      y: round(-y / zoom),
      width: round(width / zoom),
      height: round(height / zoom),
    });
  }, [x, y, zoom, width, height, followed]);
  useEffect(() => () => setView(null), []);
  return null;
}

/** Shows what the followed person sees, until the reader moves over the sheet themselves. */
function FollowedView() {
  const flow = useReactFlow();
  const store = useStoreApi();
  const shown = usePresence(
    (state) => state.others.find(({ connectionId }) => connectionId === state.followed)?.place.view ?? null,
  );
  const isFollowing = usePresence((state) => state.followed !== undefined);
  useEffect(() => {
    if (shown === null) return;
    const { width, height } = store.getState();
    const zoom = Math.min(width / shown.width, height / shown.height);
    void flow.setViewport(
      {
        x: width / 2 - (shown.x + shown.width / 2) * zoom,
        y: height / 2 - (shown.y + shown.height / 2) * zoom,
        zoom,
      },
      { duration: still() ? 0 : glideMs },
    );
  }, [shown, flow, store]);
  useEffect(() => {
    const { domNode } = store.getState();
    if (!isFollowing || domNode === null) return;
    const leave = (): void => follow(undefined);
    domNode.addEventListener('wheel', leave, { passive: true });
    domNode.addEventListener('pointerdown', leave);
    return () => {
      domNode.removeEventListener('wheel', leave);
      domNode.removeEventListener('pointerdown', leave);
    };
  }, [isFollowing, store]);
  return null;
}
