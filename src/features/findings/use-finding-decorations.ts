import { useMemo } from 'react';
import type { Decorations } from '../../drawing/decorations.ts';
import { elementKey } from '../../drawing/decorations.ts';
import { findingsToDecorations } from '../../drawing/findings-to-decorations.ts';
import { collections } from '../../engine/model/design.ts';
import type { MergePatch } from '../../engine/model/merge-patch.ts';
import { applyPatch } from '../../engine/model/merge-patch.ts';
import { tunnelStates } from '../../engine/network/can-come-up.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { runRules } from '../../engine/rules/run-rules.ts';
import { useChecks } from '../../workspace/checks-context.tsx';

/** The elements that a patch changes, as a tone that shows them. */
const touchedBy = (patch: MergePatch): Decorations['tones'] =>
  Object.fromEntries(
    collections.flatMap((collection) =>
      Object.entries((patch[collection] ?? {}) as { readonly [id: string]: unknown })
        .filter(([, change]) => change !== null)
        .map(([id]) => [elementKey({ collection, id }), ['hovered' as const]]),
    ),
  );

/**
 * What the checks have to show on the sheet. While a fix is looked at, what would be left to show after it, with what it
 * would change marked.
 */
export function useFindingDecorations(
  selectedKey: string | null,
  preview: MergePatch | undefined,
): Decorations {
  const checks = useChecks();
  const document = useMemo(
    () => (preview === undefined ? checks.document : applyPatch(checks.document, preview)),
    [checks.document, preview],
  );
  return useMemo(() => {
    const findings = preview === undefined ? checks.findings : runRules(document, checks.numbering);
    const down = [...tunnelStates(indexNetwork(document))].filter(([, state]) => !state.up).map(([id]) => id);
    const decorations = findingsToDecorations(
      findings,
      down,
      selectedKey ?? undefined,
      (key) => checks.waiverOf(key) !== undefined,
    );
    return preview === undefined
      ? decorations
      : { ...decorations, tones: { ...decorations.tones, ...touchedBy(preview) }, balloons: [] };
  }, [checks, document, preview, selectedKey]);
}
