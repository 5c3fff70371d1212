import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button } from '../../components/button.tsx';
import { CellGrid, FieldError, ReadCell } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ChoiceCell, InputCell, SelectCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import type { CreateDesign, demoDesigns, Engagement } from '../../contract/designs.ts';
import { asApiError } from '../../lib/api-error.ts';
import { stretchForm } from '../../lib/stretch-address.ts';
import { designPath } from '../../lib/workspace-path.ts';
import { DocumentProblems } from './document-problems.tsx';
import { useCreateDesign } from './engagements-query.ts';
import { readDesignFile, type DesignFile } from './read-design-file.ts';
import { titleProblem } from './title-problem.ts';

/** With the assistant the design is made empty, and its form opened on it. */
type Source = CreateDesign['from']['kind'] | 'assistant';
type Demo = (typeof demoDesigns)[number];

const sources = [
  { value: 'empty', label: 'Empty sheet' },
  { value: 'assistant', label: 'Stretch' },
  { value: 'demo', label: 'Demo' },
  { value: 'copy', label: 'Copy' },
  { value: 'document', label: 'File' },
] as const satisfies readonly { readonly value: Source; readonly label: string }[];

const demos = [
  { value: 'fault-free', label: 'Four ferry terminals, without faults' },
  { value: 'planted-faults', label: 'The same with planted faults, to see the checks at work' },
] as const;
const demoTitles: Readonly<Record<Demo, string>> = {
  'fault-free': 'Terminals stretch, phase 1',
  'planted-faults': 'Terminals stretch, with planted faults',
};

interface NewDesignDialogProps {
  /** Where it may go: engagements that are not archived. */
  readonly engagements: readonly Engagement[];
  readonly engagementId?: string;
  /** The design to begin with a copy of. */
  readonly copyOf?: { readonly id: string; readonly title: string };
  readonly onClose: () => void;
}

/** Makes a design: empty, by the assistant, from the demo, as a copy, or from a design's own file. Opens it when it is made. */
export function NewDesignDialog({ engagements, engagementId, copyOf, onClose }: NewDesignDialogProps) {
  const navigate = useNavigate();
  const create = useCreateDesign();
  const [target, setTarget] = useState(engagementId ?? engagements[0]?.id ?? '');
  const [source, setSource] = useState<Source>(copyOf === undefined ? 'empty' : 'copy');
  const [demo, setDemo] = useState<Demo>('fault-free');
  const [copyId, setCopyId] = useState(copyOf?.id ?? '');
  const [file, setFile] = useState<DesignFile>();
  // Until the reader types a title, it follows from what the design begins with.
  const [typedTitle, setTypedTitle] = useState<string>();
  const [tried, setTried] = useState(false);

  const designs = engagements.flatMap((engagement) =>
    engagement.designs.map((design) => ({
      value: design.id,
      label: `${engagement.name}: ${design.title}`,
      title: design.title,
    })),
  );
  const title = typedTitle ?? suggestedTitle();
  const problem = titleProblem('Title', title);
  const from = whatToBeginWith();
  const refusal = create.error === null ? null : asApiError(create.error);

  function suggestedTitle(): string {
    if (source === 'demo') return demoTitles[demo];
    if (source === 'document') return file?.ok === true ? (file.title ?? '') : '';
    if (source !== 'copy') return '';
    const original = designs.find(({ value }) => value === copyId)?.title;
    return original === undefined ? '' : `${original}, copy`;
  }

  function whatToBeginWith(): CreateDesign['from'] | null {
    if (source === 'empty' || source === 'assistant') return { kind: 'empty' };
    if (source === 'demo') return { kind: 'demo', demo };
    if (source === 'copy') return copyId === '' ? null : { kind: 'copy', designId: copyId };
    return file?.ok === true ? { kind: 'document', document: file.document } : null;
  }

  const submit = (): void => {
    setTried(true);
    if (problem !== undefined || from === null || target === '') return;
    create.mutate(
      { engagementId: target, title: title.trim(), from },
      {
        onSuccess: (design) =>
          void navigate(`${designPath(design.id)}${source === 'assistant' ? `?stretch=${stretchForm}` : ''}`),
      },
    );
  };

  return (
    <Dialog
      open
      onOpenChange={onClose}
      onSubmit={submit}
      title="New design"
      widthPx={540}
      footer={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" kind="primary" busy={create.isPending}>
            Create and open
          </Button>
        </>
      }
    >
      <CellGrid>
        <SelectCell
          label="Engagement"
          value={target}
          options={engagements.map(({ id, name }) => ({ value: id, label: name }))}
          onChange={setTarget}
        />
        <ChoiceCell
          label="Begins with"
          value={source}
          options={sources}
          onChange={(value) => {
            setSource(value);
            create.reset();
          }}
        />
        {source === 'assistant' && (
          <ReadCell label="Stretch">
            From your sites and segments to a complete first design, in one form.
          </ReadCell>
        )}
        {source === 'demo' && (
          <SelectCell label="Which demo" value={demo} options={demos} onChange={setDemo} />
        )}
        {source === 'copy' && (
          <SelectCell
            label="Copy of"
            value={copyId}
            placeholder={designs.length === 0 ? 'There is no design to copy yet' : 'Choose a design'}
            options={designs}
            error={tried && copyId === '' ? 'No design is chosen. Choose the one to copy.' : undefined}
            onChange={setCopyId}
          />
        )}
        {source === 'document' && (
          <InputCell
            label="A design’s own file (JSON)"
            type="file"
            accept=".json,application/json"
            error={
              tried && file === undefined
                ? 'No file is chosen. Choose one that was exported from a design.'
                : undefined
            }
            onChange={(event) => {
              const chosen = event.target.files?.[0];
              create.reset();
              if (chosen === undefined) setFile(undefined);
              else void readDesignFile(chosen).then(setFile);
            }}
          />
        )}
        <InputCell
          label="Title"
          value={title}
          error={tried ? problem : undefined}
          onChange={(event) => setTypedTitle(event.target.value)}
        />
      </CellGrid>
      {source === 'document' && file?.ok === false && <FieldError>{file.problem}</FieldError>}
      {refusal !== null &&
        (refusal.code === 'invalid-design' ? (
          <DocumentProblems problems={refusal.details} message={refusal.message} />
        ) : (
          <ErrorNotice className="mt-14">{refusal.message}</ErrorNotice>
        ))}
    </Dialog>
  );
}
