import { Button } from '../components/button.tsx';
import { Icon } from '../components/icon.tsx';
import { sheetOfSite } from '../drawing/sheets/sheet-numbers.ts';
import type { Design } from '../engine/model/design.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';
import { keyWords } from './commands/shortcuts.ts';
import { useDrawn } from './geometry-context.tsx';
import type { NamedCommand } from './named-command.ts';
import type { SheetNumber } from './use-sheet-number.ts';

/** The sites of a sheet in few words. */
export const sheetWords = (design: Pick<Design, 'sites' | 'layout'>, sheet: number): string => {
  const names = Object.entries(design.sites)
    .filter(([id]) => sheetOfSite(design.layout, id) === sheet)
    .map(([, { name }]) => name)
    .sort((a, b) => a.localeCompare(b, 'en', { numeric: true }));
  if (names.length === 0) return 'no site';
  return names.length <= 2 ? names.join(', ') : `${names[0]} and ${names.length - 1} more`;
};

const numbersTo = (of: number): readonly number[] => Array.from({ length: of }, (_, i) => i + 1);

/** Going to each sheet of a design, for the search; none where there is one sheet. */
export const sheetCommands = (
  design: Pick<Design, 'sites' | 'layout'>,
  { of, turnTo }: SheetNumber,
): readonly NamedCommand[] =>
  of === 1
    ? []
    : numbersTo(of).map((number) => ({
        name: `Sheet ${number}`,
        kind: 'Sheets',
        detail: sheetWords(design, number),
        run: () => turnTo(number),
      }));

/** Turns the sheets of a design that lies on several; says so when the address names one that isn't there. */
export function SheetTurner() {
  const { sheet } = useDrawn();
  const sites = useOpenState(({ document }) => document.sites);
  const layout = useOpenState(({ document }) => document.layout);
  const { number, of, problem, turnTo } = sheet;
  if (of === 1 && problem === undefined) return null;
  return (
    <div className="sheet-turner">
      {problem !== undefined && <p role="alert">{problem}</p>}
      {of > 1 && (
        <nav aria-label="Sheets">
          <Button
            kind="quiet"
            small
            iconOnly
            aria-label="Previous sheet"
            title={`Previous sheet (${keyWords('previousSheet')})`}
            disabled={number === 1}
            icon={<Icon name="chevron-left" size={14} />}
            onClick={() => turnTo(number - 1)}
          />
          <select aria-label="Sheet" value={number} onChange={({ target }) => turnTo(Number(target.value))}>
            {numbersTo(of).map((one) => (
              <option key={one} value={one}>
                {`Sheet ${one} of ${of}: ${sheetWords({ sites, layout }, one)}`}
              </option>
            ))}
          </select>
          <Button
            kind="quiet"
            small
            iconOnly
            aria-label="Next sheet"
            title={`Next sheet (${keyWords('nextSheet')})`}
            disabled={number === of}
            icon={<Icon name="chevron-right" size={14} />}
            onClick={() => turnTo(number + 1)}
          />
        </nav>
      )}
    </div>
  );
}
