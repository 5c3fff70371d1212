import { screen, within } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { pairDesign } from '../../support/designs.ts';
import { renderInspector } from './render-inspector.tsx';

const id = 'as-s0-s1';
const selection = [{ collection: 'associations', id }] as const;

describe('the inspector of an association', () => {
  it('mirrors both ends, with the way it goes and its tunnels', () => {
    renderInspector(pairDesign(), { selection });
    expect(screen.getByText('can come up')).toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Select Coastal access' })).toBeInTheDocument();
    expect(screen.getByRole('button', { name: 'Select tn-s0-s1-a' })).toBeInTheDocument();
    expect(screen.getByLabelText('Set-up at Head office')).toHaveDisplayValue('starts');
    expect(screen.getByLabelText('Set-up at Gullhaven')).toHaveDisplayValue('answers');
  });

  it('asks for the name of a key in the vault and says that keys are never stored', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    expect(screen.getByText(/Keys are never stored here/)).toBeInTheDocument();
    const entry = screen.getByLabelText('Key’s name in the vault of Gullhaven');
    await user.clear(entry);
    await user.type(entry, 'ipsec gul 2{Enter}');
    expect(document().associations[id]!.b.authentication).toEqual({
      method: 'pre-shared-key',
      vaultEntry: 'ipsec gul 2',
    });
  });

  it('forgets the vault’s entry when an end goes over to certificates, and takes the other’s when it comes back', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    const method = screen.getByLabelText('Authenticated by at Gullhaven');
    await user.selectOptions(method, 'certificate');
    expect(document().associations[id]!.b.authentication).toEqual({ method: 'certificate' });
    expect(screen.getByText('≠')).toBeInTheDocument();
    await user.selectOptions(method, 'shared key');
    expect(document().associations[id]!.b.authentication).toEqual(
      document().associations[id]!.a.authentication,
    );
  });

  it('edits proposals in their order', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    await user.click(screen.getByRole('button', { name: 'ESP proposals' }));
    const list = screen.getByRole('group', { name: 'ESP proposals of Gullhaven' });
    await user.click(within(list).getByRole('button', { name: /Add a proposal/ }));
    await user.selectOptions(within(list).getAllByLabelText('Encryption at Gullhaven')[1]!, 'AES-CBC');
    await user.selectOptions(within(list).getByLabelText('Integrity at Gullhaven'), 'HMAC-SHA2-256-128');
    await user.click(within(list).getByRole('button', { name: 'Move ESP proposal 2 up' }));
    const proposals = Object.values(document().associations[id]!.b.espProposals!);
    const [first, second] = [...proposals].sort((a, b) => (a.rank < b.rank ? -1 : 1));
    expect(first).toMatchObject({ encryption: 'aes-cbc', keyBits: 256, integrity: 'hmac-sha2-256-128' });
    expect(second).toMatchObject({ encryption: 'aes-gcm-16' });
  });

  it('drops what a chosen transform has no use for', async () => {
    const cbc = applyPatch(pairDesign(), {
      associations: {
        [id]: {
          b: { espProposals: { first: { encryption: 'aes-cbc', integrity: 'hmac-sha1-96', keyBits: 128 } } },
        },
      },
    });
    const { user, document } = renderInspector(cbc, { selection });
    const list = screen.getByRole('group', { name: 'ESP proposals of Gullhaven' });
    await user.selectOptions(within(list).getByLabelText('Encryption at Gullhaven'), 'ChaCha20-Poly1305');
    const proposal = document().associations[id]!.b.espProposals!['first']!;
    expect(proposal).not.toHaveProperty('integrity');
    expect(proposal).not.toHaveProperty('keyBits');
  });

  it('opens proposals that have nothing in common, and takes over the other end’s', async () => {
    const apart = applyPatch(pairDesign(), {
      associations: { [id]: { b: { ikeProposals: { first: { group: 14 } } } } },
    });
    const { user, document } = renderInspector(apart, { selection });
    expect(screen.getByText('The ends have no group in common.')).toBeInTheDocument();
    await user.click(screen.getAllByRole('button', { name: 'Take over from Head office' })[0]!);
    expect(document().associations[id]!.b.ikeProposals).toEqual(document().associations[id]!.a.ikeProposals);
    expect(screen.queryByText('The ends have no group in common.')).toBeNull();
  });

  it('keeps lifetimes in seconds and shows them in hours', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    await user.click(screen.getByRole('button', { name: 'Keeping alive and renewing' }));
    const field = screen.getByLabelText('IKE lifetime at Gullhaven');
    expect(field).toHaveValue('4 h');
    await user.clear(field);
    await user.type(field, '8 h{Enter}');
    expect(document().associations[id]!.b.ikeLifetimeSeconds).toBe(28_800);
    expect(screen.getByText('≠')).not.toHaveClass('bg-red');
  });

  it('switches the peer’s liveness off and on', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    await user.click(screen.getByRole('button', { name: 'Keeping alive and renewing' }));
    const liveness = screen.getByLabelText('Peer’s liveness at Gullhaven');
    await user.selectOptions(liveness, 'off');
    expect(document().associations[id]!.b.liveness).toBe('off');
    await user.selectOptions(liveness, 'checked');
    expect(document().associations[id]!.b.liveness).toEqual({ intervalSeconds: 10, tries: 3 });
    await user.selectOptions(liveness, 'not stated');
    expect(document().associations[id]!.b).not.toHaveProperty('liveness');
  });

  it('adds selectors that take in the loopbacks and refuses what is no prefix', async () => {
    const bare = applyPatch(pairDesign(), { associations: { [id]: { a: { selectors: null } } } });
    const { user, document } = renderInspector(bare, { selection });
    await user.click(screen.getByRole('button', { name: 'Selectors' }));
    const list = screen.getByRole('group', { name: 'selectors of Head office' });
    await user.click(within(list).getByRole('button', { name: /Add a selector/ }));
    expect(Object.values(document().associations[id]!.a.selectors!)[0]).toMatchObject({
      local: '10.255.0.1/32',
      remote: '10.255.0.2/32',
    });
    const remote = within(list).getByLabelText('Remote at Head office');
    await user.clear(remote);
    await user.type(remote, '10.255.0.2{Enter}');
    expect(within(list).getByRole('alert')).toHaveTextContent(
      'Remote at Head office 10.255.0.2 does not fit',
    );
  });

  it('orders the landings that an end tries', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    await user.click(screen.getByRole('button', { name: 'Ways out' }));
    await user.click(
      within(screen.getByRole('group', { name: 'ways out of Gullhaven' })).getByRole('button', {
        name: 'Remove way out 1',
      }),
    );
    expect(document().associations[id]!.b.via).toEqual({});
    await user.selectOptions(
      screen.getByLabelText('Add a landing at Gullhaven'),
      'fw-s1 wan1 on Coastal access',
    );
    expect(Object.values(document().associations[id]!.b.via!)).toMatchObject([{ landing: 'ld-s1-coast' }]);
  });

  it('goes with its tunnels when it is removed', async () => {
    const { user, document } = renderInspector(pairDesign(), { selection });
    await user.click(screen.getByRole('button', { name: `More for ${id}` }));
    await user.click(await screen.findByRole('menuitem', { name: 'Remove' }));
    expect(document().associations).toEqual({});
    expect(document().tunnels).toEqual({});
  });
});

describe('the findings of an association', () => {
  it('open the section that holds the field, mark its title and say what is wrong there', () => {
    const missing = applyPatch(pairDesign(), {
      associations: { [id]: { b: { selectors: { loopbacks: { local: '10.99.0.1/32' } } } } },
    });
    renderInspector(missing, { selection });
    const section = screen.getByRole('button', { name: /^Selectors.*blocking/ });
    expect(section).toHaveAttribute('aria-expanded', 'true');
    const list = screen.getByRole('group', { name: 'selectors of Gullhaven' });
    expect(list).toHaveTextContent(/10\.255\.0\.2/);
  });
});
