import { useEffect, useMemo, useRef } from 'react';
import { sheetCount } from '../drawing/sheets/sheet-numbers.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { useCurrentSheet } from '../workspace/current-sheet.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';

export interface SheetNumber {
  readonly number: number;
  readonly of: number;
  /** Why the number in the address is none of these; the first sheet is shown then. */
  readonly problem: string | undefined;
  readonly turnTo: (number: number) => void;
}

/** The number of a sheet as an address gives it; '' stands for the first. */
export const readSheetNumber = (text: string, of: number): Pick<SheetNumber, 'number' | 'problem'> => {
  const number = text === '' ? 1 : /^[1-9]\d?$/.test(text) ? Number(text) : Number.NaN;
  if (number <= of) return { number, problem: undefined };
  const range = of === 1 ? 'has sheet 1 only' : `has sheets 1 to ${of}`;
  return { number: 1, problem: `There is no sheet “${text}”: this design ${range}. Sheet 1 is shown.` };
};

/** Which sheet is shown, kept in the address so that a link leads to it. */
export function useSheetNumber(): SheetNumber {
  const of = useOpenState(({ document }) => sheetCount(document));
  const { valueOf, change } = useSearchValues();
  const { number, problem } = readSheetNumber(valueOf('sheet'), of);
  const write = useRef(change);
  useEffect(() => {
    write.current = change;
  });
  useEffect(() => {
    useCurrentSheet.setState({ number });
    return () => useCurrentSheet.setState({ number: 1 });
  }, [number]);
  return useMemo(
    () => ({
      number,
      of,
      problem,
      turnTo: (next) => write.current({ sheet: next === 1 ? '' : String(next) }),
    }),
    [number, of, problem],
  );
}
