import { useState } from 'react';
import { applyPatch } from '../../engine/model/merge-patch.ts';
import { Button } from '../../components/button.tsx';
import { FieldError } from '../../components/cell.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import { stretch } from '../../engine/stretch/stretch.ts';
import type { StretchForm } from '../../engine/stretch/stretch-form.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { newEntryId, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { firstForm } from './first-form.ts';
import { keepForm, keptForm } from './kept-form.ts';
import { NumbersPart } from './numbers-part.tsx';
import { PreviewSheet } from './preview-sheet.tsx';
import type { Preview } from './preview.ts';
import { otherProblems } from './problem-words.ts';
import { putOnSheet } from './put-on-sheet.ts';
import { SegmentsPart } from './segments-part.tsx';
import { SitesPart } from './sites-part.tsx';
import { TopologyPart } from './topology-part.tsx';
import { TransportsPart } from './transports-part.tsx';
import { usePreview } from './use-preview.ts';

type Drawn = Extract<Preview, { ok: true }>;

/** Fields that have a cell which says what is wrong with them. */
const hasCell = (field: string): boolean =>
  /^(topology\.(kind|hub)|encrypted|domain|pools\.(loopbacks|vnis)|transports\.\d+\.(name|mtu)|sites\.\d+\.(name|landings|landings\.\d+\.address)|segments\.\d+\.(name|vlan|subnet|mtu|mustBeFiltered|etherTypes|protocols|sites))$/.test(
    field,
  );

const planName = ({ sites }: StretchForm): string => `Stretch over ${sites.length} sites`;

/** From a short form to a complete first design, drawn and checked beside it while it is filled in. */
export function StretchDialog({
  onClose,
  onDone,
}: {
  readonly onClose: () => void;
  readonly onDone: () => void;
}) {
  const open = useOpenDesign();
  const { designId } = useDesignPlace();
  const document = useOpenState((state) => state.document);
  const { numbering } = useChecks();
  const [form, setForm] = useState(() => keptForm(designId) ?? firstForm(document));
  const { preview, behind, doing, failed } = usePreview(form, document, numbering);
  const [last, setLast] = useState<Drawn>();
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<string>();
  if (preview?.ok === true && preview !== last) setLast(preview);
  const problems = preview === undefined || preview.ok ? [] : preview.problems;
  const change = (next: StretchForm): void => {
    setForm(next);
    setFailure(undefined);
    keepForm(designId, next);
  };
  const part = { form, problems, onChange: change };

  const submit = async (): Promise<void> => {
    const answer = stretch(form, { design: document, newId: newEntryId, numbering });
    if (!answer.ok) return;
    setBusy(true);
    const why = await putOnSheet(open, planName(form), answer.patch);
    setBusy(false);
    if (why !== undefined) return setFailure(why);
    keepForm(designId, undefined);
    const after = applyPatch(document, answer.patch);
    const added = Object.keys(after.tunnels).length - Object.keys(document.tunnels).length;
    showToast({
      tone: 'done',
      text: `${form.sites.length} sites and ${added} ${added === 1 ? 'tunnel' : 'tunnels'} are on the sheet.`,
      action: { label: 'Undo', onSelect: () => open.undo() },
    });
    onDone();
    onClose();
  };

  return (
    <Dialog
      open
      onOpenChange={onClose}
      title="Stretch"
      description="A complete first design from a few answers. Everything can be changed on the sheet afterwards."
      whole
      footer={
        <>
          <Button
            kind="quiet"
            onClick={() => {
              change(firstForm(document));
              keepForm(designId, undefined);
            }}
          >
            Start over
          </Button>
          <Button onClick={onClose}>Cancel</Button>
          <Button
            kind="primary"
            busy={busy}
            disabled={preview?.ok !== true || behind}
            onClick={() => void submit()}
          >
            Put it on the sheet
          </Button>
        </>
      }
    >
      <div className="grid h-full min-h-0 grid-cols-[minmax(0,560px)_minmax(0,1fr)] max-lg:block max-lg:overflow-y-auto">
        <div className="flex min-h-0 flex-col gap-20 overflow-y-auto px-20 py-16 lg:border-r lg:border-rule-2 max-lg:overflow-visible">
          <TopologyPart {...part} />
          <SitesPart {...part} />
          <SegmentsPart {...part} />
          <TransportsPart {...part} />
          <NumbersPart {...part} />
          {otherProblems(problems, hasCell).map((sentence) => (
            <FieldError key={sentence}>{sentence}</FieldError>
          ))}
          {failure !== undefined && <ErrorNotice>{failure}</ErrorNotice>}
        </div>
        <div className="flex min-h-0 flex-col bg-desk max-lg:h-[70vh]">
          <PreviewSheet {...{ preview, last, behind, doing, failed }} />
        </div>
      </div>
    </Dialog>
  );
}
