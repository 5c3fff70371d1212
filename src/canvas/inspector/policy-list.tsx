import { CellGrid } from '../../components/cell.tsx';
import type { DeepReadonly } from '../../engine/model/design.ts';
import { joinPatches, patchAt } from '../../engine/model/merge-patch.ts';
import { frameKinds, type PolicyRule } from '../../engine/model/overlay.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import type { FieldPath } from './field-marks.ts';
import { FlagField, SelectField, TextField } from './fields.tsx';
import { OrderedList } from './ordered-list.tsx';
import { useCommit } from './use-field.ts';
import { etherType, numberList, textList, wholeNumber } from '../../lib/written-value.ts';

type Rule = DeepReadonly<PolicyRule>;
type Frames = PolicyRule['frames'];

const number = wholeNumber();
const frameLabels: Readonly<Record<Frames, string>> = {
  any: 'any frame',
  arp: 'ARP',
  ipv4: 'IPv4',
  ipv6: 'IPv6',
  multicast: 'multicast',
  broadcast: 'broadcast',
  ethertype: 'an EtherType',
};
const directions = [
  { value: 'both', label: 'both ways' },
  { value: 'to-tunnel', label: 'into the tunnel' },
  { value: 'from-tunnel', label: 'out of the tunnel' },
] as const;

const hasAddresses = (frames: Frames): boolean => frames === 'ipv4' || frames === 'ipv6';

/** A rule in one line. */
const ruleWords = ({ name, action, frames }: Rule): string =>
  name ?? `${action === 'permit' ? 'Permit' : 'Deny'} ${frameLabels[frames]}`;

/** The filter of a cross-connect: the first rule that fits decides, and what none fits is dropped. */
export function PolicyList({ path, of }: { readonly path: FieldPath; readonly of: string }) {
  return (
    <>
      <OrderedList<Rule>
        path={path}
        noun="rule"
        of={of}
        empty="No rule: everything is dropped."
        titleOf={ruleWords}
        fresh={[
          {
            label: 'Add a rule',
            entry: () => ({ action: 'permit' as const, direction: 'both' as const, frames: 'ipv4' as const }),
          },
        ]}
      >
        {(rule, _id, at) => <RuleCells rule={rule} path={at} />}
      </OrderedList>
      <p className="text-note text-ink-2">The first rule that fits decides. What none fits is dropped.</p>
    </>
  );
}

function RuleCells({ rule, path }: { readonly rule: Rule; readonly path: FieldPath }) {
  const design = useOpenState((state) => state.document);
  const commit = useCommit();
  const at = (field: string) => [...path, field];
  const chooseFrames = (frames: Frames | undefined): void => {
    if (frames === undefined) return;
    const gone = [
      ...(frames === 'ethertype' ? [] : ['ethertype']),
      ...(hasAddresses(frames) ? [] : ['sources', 'destinations', 'protocol', 'ports']),
    ];
    commit(
      `Frames of ${ruleWords(rule)}`,
      joinPatches(design, [patchAt(at('frames'), frames), ...gone.map((field) => patchAt(at(field), null))]),
    );
  };
  return (
    <CellGrid columns={2}>
      <TextField label="Name" path={at('name')} span={2} emptyWord="none" />
      <SelectField
        label="Action"
        path={at('action')}
        required
        choices={[
          { value: 'permit', label: 'permit' },
          { value: 'deny', label: 'deny' },
        ]}
      />
      <SelectField label="Direction" path={at('direction')} required choices={directions} />
      <SelectField<Frames>
        label="Frames"
        path={at('frames')}
        required
        span={rule.frames === 'ethertype' ? 1 : 2}
        choices={frameKinds.map((value) => ({ value, label: frameLabels[value] }))}
        onChoose={chooseFrames}
      />
      {rule.frames === 'ethertype' && (
        <TextField label="EtherType" path={at('ethertype')} writing={etherType} emptyWord="any" />
      )}
      {hasAddresses(rule.frames) && (
        <>
          <TextField label="Sources" path={at('sources')} writing={textList} span={2} emptyWord="any" />
          <TextField
            label="Destinations"
            path={at('destinations')}
            writing={textList}
            span={2}
            emptyWord="any"
          />
          <TextField label="IP protocol" path={at('protocol')} writing={number} emptyWord="any" />
          <TextField label="Ports" path={at('ports')} writing={numberList} emptyWord="any" />
        </>
      )}
      <FlagField label="Logged" path={at('log')} span={2} />
    </CellGrid>
  );
}
