import { useMemo, useRef, useState, type DragEvent } from 'react';
import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import { DataTable } from '../../components/data-table.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { SelectCell } from '../../components/field-cells.tsx';
import { Icon } from '../../components/icon.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import type { Column } from '../../components/table-view.ts';
import {
  exportInventory,
  inventoryTemplate,
  type Sheet,
} from '../../engine/formats/inventory/export-inventory.ts';
import { importInventory, type Imported } from '../../engine/formats/inventory/import-inventory.ts';
import { missingColumns } from '../../engine/formats/inventory/match-columns.ts';
import type { CellProblem } from '../../engine/formats/inventory/read-rows.ts';
import {
  inventoryNames,
  inventoryTables,
  tableNamed,
  type InventoryName,
} from '../../engine/formats/inventory/tables.ts';
import type { Design } from '../../engine/model/design.ts';
import { isEmptyPatch, type MergePatch } from '../../engine/model/merge-patch.ts';
import { csvText } from '../../lib/csv.ts';
import { download } from '../../lib/download.ts';
import { newEntryId } from '../../workspace/open-design-context.tsx';
import { inputOf, matchedTo, readInventoryFile, takenFor, type InventoryFile } from './inventory-files.ts';

interface InventoryDialogProps {
  readonly design: Design;
  /** Absent for those who only read: they take tables out. */
  readonly onBringIn?: ((patch: MergePatch, rowCount: number) => void) | undefined;
  readonly onClose: () => void;
}

const save = (name: string, { heads, rows }: Sheet): void =>
  download(
    `${name}.csv`,
    new Blob(['\uFEFF', csvText([heads, ...rows])], { type: 'text/csv;charset=utf-8' }),
  );

/** Sites, devices, ports, segments and hosts as tables: in from somebody's spreadsheet, out for one. */
export function InventoryDialog({ design, onBringIn, onClose }: InventoryDialogProps) {
  const [way, setWay] = useState<'in' | 'out'>(onBringIn === undefined ? 'out' : 'in');
  const [files, setFiles] = useState<readonly InventoryFile[]>([]);
  const [refused, setRefused] = useState<readonly string[]>([]);
  // Ids are made once a file is read, so that the preview is what will be brought in.
  const imported = useMemo((): Imported | { readonly ok: false; readonly refused: string } | undefined => {
    if (files.length === 0) return undefined;
    const given = inputOf(files);
    return given.ok
      ? importInventory(design, given.input, newEntryId)
      : { ok: false, refused: given.problem };
  }, [design, files]);
  const rowCount =
    imported?.ok === true
      ? Object.values(imported.counts).reduce((sum, { added, changed }) => sum + added + changed, 0)
      : 0;

  const take = async (chosen: readonly File[]): Promise<void> => {
    const reads = await Promise.all(
      chosen.map(async (file) => readInventoryFile(file.name, await file.text())),
    );
    setFiles((before) => [...before, ...reads.flatMap((read) => (read.ok ? [read.file] : []))]);
    setRefused(reads.flatMap((read) => (read.ok ? [] : [read.problem])));
  };
  const change = (at: number, next: InventoryFile | undefined): void =>
    setFiles(files.flatMap((file, other) => (other === at ? (next === undefined ? [] : [next]) : [file])));

  return (
    <Dialog
      open
      onOpenChange={onClose}
      widthPx={760}
      title="Inventory as tables"
      description="Sites, devices, ports, segments and hosts as CSV. What a table doesn't name stays as it is."
      footer={
        <>
          <Button onClick={onClose}>Close</Button>
          {way === 'in' && imported?.ok === true && !isEmptyPatch(imported.patch) && (
            <Button kind="primary" onClick={() => onBringIn?.(imported.patch, rowCount)}>
              {rowCount === 1 ? 'Bring in 1 row' : `Bring in ${rowCount} rows`}
            </Button>
          )}
        </>
      }
    >
      <div className="flex flex-col gap-16">
        {onBringIn !== undefined && (
          <SegmentedChoice
            label="Which way"
            value={way}
            onChange={setWay}
            options={[
              { value: 'in', label: 'Bring in' },
              { value: 'out', label: 'Take out' },
            ]}
          />
        )}
        {way === 'in' ? (
          <>
            <FilePick onTake={(chosen) => void take(chosen)} />
            {refused.map((problem) => (
              <ErrorNotice key={problem}>{problem}</ErrorNotice>
            ))}
            {imported !== undefined && <Outcome imported={imported} />}
            {files.map((file, at) => (
              <FileMatch key={`${file.name} ${at}`} file={file} onChange={(next) => change(at, next)} />
            ))}
          </>
        ) : (
          <TakeOut design={design} />
        )}
      </div>
    </Dialog>
  );
}

function FilePick({ onTake }: { readonly onTake: (files: readonly File[]) => void }) {
  const input = useRef<HTMLInputElement>(null);
  const onDrop = (event: DragEvent): void => {
    event.preventDefault();
    onTake([...event.dataTransfer.files]);
  };
  return (
    <div
      onDragOver={(event) => event.preventDefault()}
      onDrop={onDrop}
      className="flex flex-col gap-10 border border-dashed border-rule-strong bg-field px-16 py-14"
    >
      <div className="flex flex-wrap items-center gap-12">
        <input
          ref={input}
          type="file"
          multiple
          accept=".csv,.tsv,.txt,text/csv"
          aria-label="CSV files"
          className="sr-only"
          onChange={(event) => {
            onTake([...(event.target.files ?? [])]);
            // The same file, mended meanwhile, can be chosen again.
            event.target.value = '';
          }}
        />
        <Button onClick={() => input.current?.click()}>Choose CSV files</Button>
        <span className="text-base text-ink-2">or drop them here; one file for each table.</span>
      </div>
      <p className="flex flex-wrap items-center gap-x-12 gap-y-4 text-note text-ink-2">
        Templates:
        {inventoryTables.map(({ name, title }) => (
          <button
            key={name}
            type="button"
            className="font-medium text-blue underline decoration-blue-soft underline-offset-2 hover:decoration-blue"
            onClick={() => save(`${name}-template`, inventoryTemplate(name))}
          >
            {title}
          </button>
        ))}
      </p>
    </div>
  );
}

/** What a file is taken for, and which of its columns are which. */
function FileMatch({
  file,
  onChange,
}: {
  readonly file: InventoryFile;
  readonly onChange: (next: InventoryFile | undefined) => void;
}) {
  const table = tableNamed(file.table);
  const matched = Object.keys(file.match).length;
  const isLacking = missingColumns(table, file.match).length > 0;
  const passedOver = file.heads.filter((_head, at) => !Object.values(file.match).includes(at));
  return (
    <section aria-label={file.name} className="flex flex-col gap-8">
      <div className="flex items-center gap-10">
        <h3 className="min-w-0 flex-1 truncate text-section font-semibold">
          {file.name}
          <span className="ml-8 text-note font-normal text-ink-2">
            {file.rows.length === 1 ? '1 row' : `${file.rows.length} rows`}
          </span>
        </h3>
        <Button
          kind="quiet"
          small
          iconOnly
          aria-label={`Take ${file.name} away`}
          icon={<Icon name="cross" size={14} />}
          onClick={() => onChange(undefined)}
        />
      </div>
      <CellGrid>
        <SelectCell<InventoryName>
          label="Is a table of"
          value={file.table}
          options={inventoryTables.map(({ name, title, explains }) => ({
            value: name,
            label: `${title}: ${explains.charAt(0).toLowerCase()}${explains.slice(1)}`,
          }))}
          onChange={(name) => onChange(takenFor(file, name))}
        />
      </CellGrid>
      <details open={isLacking} className="flex flex-col">
        <summary className="mb-8 cursor-pointer text-base text-ink-2">
          {matched === table.columns.length
            ? `All ${matched} columns are in the file`
            : `${matched} of ${table.columns.length} columns are in the file`}
          {passedOver.length > 0 &&
            `; passed over: ${passedOver.map((head) => head || 'a column without head').join(', ')}`}
        </summary>
        <CellGrid columns={3}>
          {table.columns.map(({ key, head, required }) => (
            <SelectCell
              key={key}
              label={required === true ? `${head} (needed)` : head}
              value={file.match[key] === undefined ? '' : String(file.match[key])}
              placeholder="not in the file"
              error={
                required === true && file.match[key] === undefined
                  ? `${head} is needed: say which column it is.`
                  : undefined
              }
              options={file.heads.map((text, at) => ({
                value: String(at),
                label: text === '' ? `Column ${at + 1}` : text,
              }))}
              onChange={(at) => onChange(matchedTo(file, key, Number(at)))}
              onClear={() => onChange(matchedTo(file, key, undefined))}
            />
          ))}
        </CellGrid>
      </details>
    </section>
  );
}

const problemColumns: readonly Column<CellProblem>[] = [
  {
    key: 'table',
    head: 'Table',
    cell: (each) => tableNamed(each.table).title,
    sortBy: (each) => tableNamed(each.table).title,
  },
  { key: 'line', head: 'Line', align: 'right', cell: (each) => each.line, sortBy: (each) => each.line },
  { key: 'column', head: 'Column', cell: (each) => each.column, sortBy: (each) => each.column },
  {
    key: 'value',
    head: 'Says',
    cell: (each) => (each.value === '' ? <span className="text-ink-3">nothing</span> : each.value),
    sortBy: (each) => each.value,
  },
  { key: 'expected', head: 'Expected', cell: (each) => each.expected, sortBy: (each) => each.expected },
];

function Outcome({
  imported,
}: {
  readonly imported: Imported | { readonly ok: false; readonly refused: string };
}) {
  if (!imported.ok) {
    if ('refused' in imported) return <ErrorNotice>{imported.refused}</ErrorNotice>;
    return (
      <div className="flex flex-col gap-8">
        <ErrorNotice>
          {imported.total === 1 ? 'One cell' : `${imported.total} cells`} can’t be taken, so nothing is
          brought in. Mend {imported.total === 1 ? 'it' : 'them'} in the file and choose it again
          {imported.total > imported.problems.length ? `; the first ${imported.problems.length} are` : ':'}
        </ErrorNotice>
        <DataTable
          caption="Cells that can’t be taken"
          columns={problemColumns}
          rows={imported.problems}
          rowKey={({ table, line, column, expected }) => `${table} ${line} ${column} ${expected}`}
          className="max-h-[34dvh]"
        />
      </div>
    );
  }
  return (
    <div role="status" className="border border-rule-strong bg-field px-14 py-10 text-base">
      {isEmptyPatch(imported.patch) ? (
        'The design has all of this already: nothing would change.'
      ) : (
        <ul className="flex flex-col gap-2">
          {inventoryNames.flatMap((name) => {
            const counts = imported.counts[name];
            if (counts === undefined) return [];
            return (
              <li key={name}>
                <span className="font-semibold">{tableNamed(name).title}:</span> {counts.added} added,{' '}
                {counts.changed} changed, {counts.unchanged} as they are
              </li>
            );
          })}
        </ul>
      )}
    </div>
  );
}

function TakeOut({ design }: { readonly design: Design }) {
  return (
    <ul className="border border-rule-strong bg-field">
      {inventoryTables.map(({ name, title, explains }) => {
        const sheet = exportInventory(design, name);
        return (
          <li key={name} className="flex items-center gap-12 border-b border-rule px-14 py-8 last:border-b-0">
            <span className="min-w-0 flex-1 text-base">
              <span className="font-semibold">{title}</span>
              <span className="ml-8 text-ink-2">
                {explains} {sheet.rows.length === 1 ? '1 row' : `${sheet.rows.length} rows`}.
              </span>
            </span>
            <Button small disabled={sheet.rows.length === 0} onClick={() => save(name, sheet)}>
              Save CSV
            </Button>
          </li>
        );
      })}
    </ul>
  );
}
