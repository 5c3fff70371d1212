import { Button } from '../../components/button.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import { useInspectorTools, type ConnectRequest } from './inspector-context.ts';
import { useEditable } from './use-field.ts';

const words = {
  cable: 'Cable…',
  landing: 'Land…',
  tunnel: 'Tunnel to…',
  association: 'Associate…',
} as const satisfies Record<ConnectRequest['kind'], string>;

/** Opens the dialog in which the other end is chosen; absent where nothing can be joined. */
export function ConnectButton({
  kind,
  from,
  subject,
}: {
  readonly kind: ConnectRequest['kind'];
  readonly from: ElementRef;
  /** Said to screen readers after the button's word, where several stand in a list. */
  readonly subject?: string;
}) {
  const { onConnect } = useInspectorTools();
  const editable = useEditable();
  if (onConnect === undefined || !editable) return null;
  return (
    <Button
      kind="accent"
      small
      aria-label={subject === undefined ? undefined : `${words[kind]} ${subject}`}
      onClick={() => onConnect({ kind, from })}
    >
      {words[kind]}
    </Button>
  );
}
