import { useState } from 'react';
import { CellGrid, FieldCell } from '../../components/cell.tsx';
import { CommitCell, NumberCell } from '../../components/field-cells.tsx';
import { MOST_MULTIPLIER } from '../../engine/load/load-of.ts';
import { TCP_LARGEST_WINDOW_BYTES } from '../../engine/reference/tcp.ts';

const least = 0.1;
const steps = 400;
const decades = Math.log10(MOST_MULTIPLIER / least);

/** The slider goes up by the same factor with every step, and stops at figures that can be said. */
const atStep = (step: number): number => Number((least * 10 ** ((step / steps) * decades)).toPrecision(2));
const stepOf = (multiplier: number): number =>
  Math.max(0, Math.min(steps, Math.round((Math.log10(multiplier / least) / decades) * steps)));

interface WhatIfProps {
  readonly multiplier: number;
  /** While the slider is moved; what it is let go at is settled. */
  readonly onTry: (multiplier: number) => void;
  readonly onSettle: (multiplier: number) => void;
  readonly windowBytes: number | undefined;
  readonly onWindow: (windowBytes: number | undefined) => void;
}

/** All demands times something, and the window that TCP is to be reckoned with. */
export function WhatIf({ multiplier, onTry, onSettle, windowBytes, onWindow }: WhatIfProps) {
  const [tried, setTried] = useState<number>();
  const settle = (): void => {
    if (tried === undefined) return;
    onSettle(tried);
    setTried(undefined);
  };
  return (
    <CellGrid columns="minmax(120px, 1fr) 84px 132px" className="w-full max-w-440 md:w-440">
      <FieldCell label="What if all demands were">
        {({ id }) => (
          <input
            id={id}
            type="range"
            min={0}
            max={steps}
            step={1}
            value={stepOf(tried ?? multiplier)}
            aria-valuetext={`${tried ?? multiplier} times as much`}
            onChange={(event) => {
              const next = atStep(Number(event.target.value));
              setTried(next);
              onTry(next);
            }}
            onPointerUp={settle}
            onKeyUp={settle}
            onBlur={settle}
            className="pointer-events-auto h-18 w-full cursor-pointer accent-ink outline-none"
          />
        )}
      </FieldCell>
      <CommitCell
        label="Times"
        inputMode="decimal"
        value={String(tried ?? multiplier)}
        validate={(text) => {
          const number = Number(text.replace(',', '.'));
          return number > 0 && number <= MOST_MULTIPLIER
            ? undefined
            : `Times ${text === '' ? 'is empty' : `${text} is not possible`}. Type a number above 0, up to ${MOST_MULTIPLIER}.`;
        }}
        onCommit={(text) => onSettle(Number(text.replace(',', '.')))}
      />
      <NumberCell
        label="TCP window, bytes"
        min={1}
        max={TCP_LARGEST_WINDOW_BYTES}
        value={windowBytes}
        placeholder="no limit"
        onCommit={onWindow}
      />
    </CellGrid>
  );
}
