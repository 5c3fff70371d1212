import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { sheetCount } from '../../drawing/sheets/sheet-numbers.ts';
import { collections, type Collection } from '../../engine/model/design.ts';
import { sheetSizes } from '../../engine/model/layout.ts';
import { useNumbering } from '../../workspace/checks-context.tsx';
import { newEntryId, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { placeSegment } from '../../workspace/operations/place-parts.ts';
import { AddButton } from './add-button.tsx';
import { SegmentName } from './carried-segments.tsx';
import { ElementList } from './element-link.tsx';
import { FlagField, SelectField, TextField } from './fields.tsx';
import { usePerform } from './panel-head.tsx';
import { Section } from './section.tsx';
import { useEditable } from './use-field.ts';

const countLabels: Readonly<Record<Collection, string>> = {
  sites: 'Sites',
  devices: 'Devices',
  transports: 'Transports',
  links: 'Cables, landings',
  endpoints: 'Endpoints',
  associations: 'Associations',
  tunnels: 'Tunnels',
  forwarders: 'Bridges',
  segments: 'Segments',
  demands: 'Demands',
  profiles: 'Profiles',
  notes: 'Notes',
};

/** The design itself, while nothing is selected: title block, sheet, segments, counts. */
export function DesignPanel() {
  const design = useOpenState((state) => state.document);
  const open = useOpenDesign();
  const numbering = useNumbering();
  const run = usePerform();
  const editable = useEditable();
  const segments = Object.entries(design.segments).sort(
    ([, a], [, b]) => a.letter.length - b.letter.length || (a.letter < b.letter ? -1 : 1),
  );
  const at = (field: string) => ['meta', field];
  return (
    <>
      <header>
        <p className="text-note text-ink-2">Design</p>
        <h2 className="text-title break-words text-ink">{design.meta.title}</h2>
      </header>
      <Section title="Title block">
        <CellGrid columns={2}>
          <TextField label="Title" path={at('title')} span={2} required />
          <TextField label="Supplementary title" path={at('supplementaryTitle')} span={2} emptyWord="none" />
          <TextField label="Legal owner" path={at('legalOwner')} />
          <TextField label="Document type" path={at('documentType')} />
          <TextField label="Created by" path={at('createdBy')} />
          <TextField label="Approved by" path={at('approvedBy')} />
          <TextField label="Status" path={at('status')} />
          <TextField label="Identification no." path={at('identification')} />
          <TextField label="Date of issue" path={at('dateOfIssue')} />
          <TextField label="Revision" path={at('revision')} />
          <TextField label="Language" path={at('language')} emptyWord="en" />
          <SelectField
            label="Sheet"
            path={['layout', 'sheet']}
            emptyWord="as needed"
            choices={sheetSizes.map((size) => ({ value: size, label: size }))}
          />
          <SelectField
            label="Largest sheet"
            path={['layout', 'largestSheet']}
            emptyWord="A0"
            choices={sheetSizes.filter((size) => size !== 'A0').map((size) => ({ value: size, label: size }))}
          />
          <ReadCell label="Sheets">{sheetCount(design)}</ReadCell>
          <FlagField
            label="Example"
            path={at('example')}
            words={['yes: documentation addresses are right', 'no']}
            span={2}
          />
        </CellGrid>
        {editable && (
          <p className="mt-6 text-note text-ink-2">
            Tidy takes the smallest sheet that holds everything. What the largest one you allow doesn’t hold
            goes on to further sheets.
          </p>
        )}
      </Section>
      <Section
        title={`Segments (${segments.length})`}
        beside={
          editable && (
            <AddButton
              subject="a segment"
              onClick={() => run(placeSegment(open.store.getState().document, newEntryId, numbering))}
            >
              Add
            </AddButton>
          )
        }
      >
        {segments.length === 0 && (
          <p className="text-note text-ink-3">
            A segment says what the design is for: a VLAN that several sites are to share.
          </p>
        )}
        <ul className="flex flex-col gap-6">
          {segments.map(([id, segment]) => (
            <li key={id}>
              <SegmentName id={id} segment={segment} />
            </li>
          ))}
        </ul>
      </Section>
      <Section title="Counts" open={false}>
        <CellGrid columns={3}>
          {collections.map((collection) => (
            <ReadCell key={collection} label={countLabels[collection]}>
              {Object.keys(design[collection]).length}
            </ReadCell>
          ))}
        </CellGrid>
      </Section>
      <Section title="Equipment profiles" open={false}>
        <ElementList
          of={Object.keys(design.profiles).map((id) => ({ collection: 'profiles', id }))}
          empty="The design uses none."
        />
      </Section>
    </>
  );
}
