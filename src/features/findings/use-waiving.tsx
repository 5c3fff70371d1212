import { useMemo, useState, type ReactNode } from 'react';
import { showToast } from '../../components/toast.tsx';
import { useChecks } from '../../workspace/checks-context.tsx';
import { useDesignPlace, useMayHere } from '../../workspace/design-place.tsx';
import { useWithdrawWaiver } from '../../workspace/waivers-query.ts';
import { WaiveDialog } from './waive-dialog.tsx';
import type { WaivingTools } from './waiving-tools.ts';

interface Waiving {
  /** Undefined for readers who may not waive. */
  readonly tools: WaivingTools | undefined;
  /** To be put on the page once. */
  readonly dialog: ReactNode;
}

/** Waiving findings of the open design and taking waivers back, for readers who may. */
export function useWaiving(): Waiving {
  const may = useMayHere('finding.waive');
  const { designId } = useDesignPlace();
  const { findings } = useChecks();
  const [askedKey, setAskedKey] = useState<string>();
  const { mutate: withdraw } = useWithdrawWaiver(designId);
  const tools = useMemo(
    (): WaivingTools | undefined =>
      may
        ? {
            onWaive: setAskedKey,
            onWithdraw: (waiverId) =>
              withdraw(waiverId, {
                onSuccess: ({ sentence }) =>
                  void showToast({ tone: 'done', text: `The waiver is withdrawn. It was for: ${sentence}.` }),
                onError: (error) =>
                  void showToast({ tone: 'failed', text: `The waiver was not withdrawn. ${error.message}` }),
              }),
          }
        : undefined,
    [may, withdraw],
  );
  const finding = findings.find(({ key }) => key === askedKey);
  return {
    tools,
    dialog:
      finding === undefined ? null : (
        <WaiveDialog key={finding.key} finding={finding} onClose={() => setAskedKey(undefined)} />
      ),
  };
}
