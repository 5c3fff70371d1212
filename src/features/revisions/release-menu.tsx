import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import type { ReleaseCommand } from './use-release.tsx';

/** What can be done with a draft's revision, at its stamp. */
export function ReleaseMenu({ commands }: { readonly commands: readonly ReleaseCommand[] }) {
  if (commands.length === 0) return null;
  return (
    <Menu
      trigger={
        <Button
          kind="quiet"
          small
          iconOnly
          aria-label="What to do with this revision"
          icon={<Icon name="chevron-down" size={13} />}
        />
      }
      groups={[{ actions: commands.map(({ label, run }) => ({ label, onSelect: run })) }]}
    />
  );
}
