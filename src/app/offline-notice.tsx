import { Icon } from '../components/icon.tsx';
import { useOnline } from '../lib/use-online.ts';

/** Says that there is no network, for as long as there is none. */
export function OfflineNotice() {
  const online = useOnline();
  return (
    <div role="status">
      {!online && (
        <p className="flex items-center gap-8 border-b border-degr bg-degr-wash px-14 py-5 text-base font-medium text-degr">
          <Icon name="cut-wave" />
          No network. What is on the screen stays; what you change is sent once the network is back.
        </p>
      )}
    </div>
  );
}
