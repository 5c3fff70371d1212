import { AccountFrame } from '../features/account/account-frame.tsx';
import { TokensDesk } from '../features/tokens/tokens-desk.tsx';
import { usePageTitle } from '../lib/page-title.ts';

/** /account/tokens */
export function TokensPage() {
  usePageTitle('API tokens');
  return (
    <AccountFrame
      title="API tokens"
      wide
      intro="For scripts that speak to this server in your name. Nobody else sees them here, owners of a workspace neither."
    >
      <TokensDesk />
    </AccountFrame>
  );
}
