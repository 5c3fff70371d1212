import { ShownOnce } from '../../components/shown-once.tsx';

/** A token that was just made, this once. */
export function TokenShown({ secret, onKept }: { readonly secret: string; readonly onKept: () => void }) {
  return (
    <ShownOnce what="token" secret={secret} onKept={onKept}>
      It is kept as a hash and can’t be shown again. A script sends it with every request as{' '}
      <span className="font-medium text-ink">Authorization: Bearer</span> and the token.
    </ShownOnce>
  );
}
