import { useEffect, useMemo, useState } from 'react';
import { cutMarks } from '../../drawing/parts/cuts.ts';
import { ghostParts } from '../../drawing/parts/ghost-part.ts';
import { loopChevrons } from '../../drawing/parts/loop-chevrons.ts';
import { overhangParts } from '../../drawing/parts/overhang-part.ts';
import { useDrawing } from '../drawing-context.ts';
import { Shapes } from '../../components/shapes.tsx';

const driftPx = 26;
const driftMs = 1_400;
const idleAfterMs = 10_000;

/** How far chevrons have drifted, 0 to 26 px; still while nobody has touched anything for a while or motion is unwanted. */
function useDrift(active: boolean): number {
  const [phasePx, setPhasePx] = useState(0);
  useEffect(() => {
    if (!active || window.matchMedia('(prefers-reduced-motion: reduce)').matches) return;
    let touched = performance.now();
    let frame = 0;
    let start: number | undefined;
    const tick = (now: number): void => {
      start ??= now;
      setPhasePx((((now - start) % driftMs) / driftMs) * driftPx);
      if (now - touched < idleAfterMs && !document.hidden) frame = requestAnimationFrame(tick);
      else frame = 0;
    };
    const wake = (): void => {
      touched = performance.now();
      if (frame === 0) frame = requestAnimationFrame(tick);
    };
    frame = requestAnimationFrame(tick);
    const events = ['pointerdown', 'keydown', 'wheel', 'visibilitychange'] as const;
    for (const event of events) document.addEventListener(event, wake, { passive: true });
    return () => {
      cancelAnimationFrame(frame);
      for (const event of events) document.removeEventListener(event, wake);
    };
  }, [active]);
  return phasePx;
}

function Chevrons() {
  const { geometry, look } = useDrawing();
  const phasePx = useDrift(look.decorations.loops.length > 0);
  return <Shapes shapes={loopChevrons(geometry, look, phasePx)} />;
}

/** A cable that would cure something: a press, or Enter while it has the focus, accepts it. */
function Ghosts() {
  const { geometry, look, editable, acceptGhost } = useDrawing();
  const shapes = useMemo(() => ghostParts(geometry, look), [geometry, look]);
  return shapes.map((shape) => {
    const id = shape.key ?? '';
    const label = look.decorations.ghosts.find((ghost) => ghost.id === id)?.label ?? 'the missing cable';
    return (
      <g
        key={id}
        role="button"
        tabIndex={editable ? 0 : -1}
        aria-disabled={!editable}
        aria-label={`Accept: ${label}`}
        className="ghost-button"
        onClick={() => editable && acceptGhost(id)}
        onKeyDown={(event) => {
          if (event.key !== 'Enter' || !editable) return;
          event.stopPropagation();
          acceptGhost(id);
        }}
      >
        <Shapes shapes={[shape]} />
      </g>
    );
  });
}

/** The faults themselves, drawn over what they befall. */
export function FaultMarks() {
  const { geometry, facts, look } = useDrawing();
  const shapes = useMemo(
    () => [...cutMarks(geometry, facts, look), ...overhangParts(geometry, facts, look)],
    [geometry, facts, look],
  );
  return (
    <>
      <Shapes shapes={shapes} />
      <Chevrons />
      <Ghosts />
    </>
  );
}
