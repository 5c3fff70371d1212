import { formatRate } from '../../lib/rate-text.ts';
import { DataTable, type Column } from '../../components/data-table.tsx';
import type { EquipmentProfile } from '../../contract/profiles.ts';

interface ProfilesTableProps {
  readonly profiles: readonly EquipmentProfile[];
  readonly selectedId: string | undefined;
  readonly onSelect: (id: string) => void;
}

const rateCell = (rateBps: number | undefined) =>
  rateBps === undefined ? <span className="text-ink-3">not stated</span> : formatRate(rateBps);

const columns: readonly Column<EquipmentProfile>[] = [
  {
    key: 'name',
    head: 'Profile',
    cell: ({ profile, archivedAt }) => (
      <span className="font-medium">
        {profile.name}
        {archivedAt !== null && <span className="font-normal text-ink-3"> (archived)</span>}
      </span>
    ),
    sortBy: ({ profile }) => profile.name,
    text: ({ profile }) => profile.name,
  },
  {
    key: 'many',
    head: 'Encrypted',
    align: 'right',
    widthPx: 110,
    cell: ({ profile }) => rateCell(profile.encrypted?.manyFlowsBps ?? profile.encrypted?.oneFlowBps),
    sortBy: ({ profile }) => profile.encrypted?.manyFlowsBps ?? profile.encrypted?.oneFlowBps,
    text: ({ profile }) => String(profile.encrypted?.manyFlowsBps ?? profile.encrypted?.oneFlowBps ?? ''),
  },
  {
    key: 'used',
    head: 'Designs',
    align: 'right',
    widthPx: 80,
    cell: ({ usedIn }) => usedIn.length,
    sortBy: ({ usedIn }) => usedIn.length,
    text: ({ usedIn }) => String(usedIn.length),
  },
];

export function ProfilesTable({ profiles, selectedId, onSelect }: ProfilesTableProps) {
  return (
    <DataTable
      caption="Equipment profiles"
      columns={columns}
      rows={profiles}
      rowKey={({ id }) => id}
      selectedKey={selectedId}
      onSelect={({ id }) => onSelect(id)}
    />
  );
}
