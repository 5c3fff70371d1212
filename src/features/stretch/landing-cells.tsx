import { CommitCell, SelectCell } from '../../components/field-cells.tsx';
import type { LandingPlan } from '../../engine/stretch/stretch-form.ts';
import { withField } from './form-part.tsx';

export const gateways = [
  { value: 'firewall', label: 'firewall' },
  { value: 'ha-pair', label: 'HA pair' },
  { value: 'router', label: 'router' },
] as const;

const reaches = [
  { value: 'fixed', label: 'fixed address' },
  { value: 'dynamic', label: 'changing address' },
  { value: 'hides', label: 'behind NAT' },
  { value: 'forwarded', label: 'NAT, forwarded' },
] as const;
type Reach = (typeof reaches)[number]['value'];

const reachOf = ({ dynamic, nat }: LandingPlan): Reach =>
  dynamic === true ? 'dynamic' : nat === 'hides' || nat === 'forwarded' ? nat : 'fixed';

const withReach = (landing: LandingPlan, reach: Reach): LandingPlan => {
  const { dynamic: _dynamic, nat: _nat, ...rest } = landing;
  if (reach === 'fixed') return rest;
  if (reach === 'dynamic') return withField({ ...rest, dynamic: true }, 'address', undefined);
  return { ...rest, nat: reach };
};

/** How a site meets a transport: three cells of a grid. */
export function LandingCells({
  landing,
  place,
  transports,
  error,
  addressError,
  onChange,
}: {
  readonly landing: LandingPlan;
  /** The site, where several stand one beneath the other. */
  readonly place?: string;
  readonly transports: readonly { readonly value: string; readonly label: string }[];
  readonly error: string | undefined;
  readonly addressError: string | undefined;
  readonly onChange: (landing: LandingPlan) => void;
}) {
  const reach = reachOf(landing);
  return (
    <>
      <SelectCell
        label="Lands on"
        place={place}
        value={landing.transport}
        options={transports}
        error={error}
        onChange={(transport) => onChange({ ...landing, transport })}
      />
      <SelectCell
        label="Reached by"
        place={place}
        value={reach}
        options={reaches}
        onChange={(value) => onChange(withReach(landing, value))}
      />
      <CommitCell
        label="Outside address"
        place={place}
        value={landing.address ?? ''}
        placeholder={reach === 'dynamic' ? 'changes' : 'not known yet'}
        disabled={reach === 'dynamic'}
        error={addressError}
        onCommit={(text) => onChange(withField(landing, 'address', text === '' ? undefined : text))}
      />
    </>
  );
}
