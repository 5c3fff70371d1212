import { Link } from 'react-router-dom';
import { CellGrid } from '../../components/cell.tsx';
import { CheckCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { showToast } from '../../components/toast.tsx';
import type { WorkspaceSettings } from '../../contract/workspaces.ts';
import { asApiError } from '../../lib/api-error.ts';
import { SettingsSection } from './settings-section.tsx';
import { useChangeSettings } from './settings-query.ts';

/** Whether everybody in the workspace has to sign in with two steps. */
export function TwoStepSection({ settings }: { readonly settings: WorkspaceSettings }) {
  const change = useChangeSettings(settings.id);
  const { requiresSecondStep, withoutSecondStep } = settings;
  return (
    <SettingsSection
      title="Two-step sign-in"
      about="Whoever has not set it up is asked to, and sees nothing of the workspace until then. Tokens of theirs stop as well."
    >
      <CellGrid>
        <CheckCell
          label="Required of everybody here"
          checked={requiresSecondStep}
          disabled={change.isPending}
          words={['Required', 'Up to each person']}
          onChange={(checked) =>
            change.mutate(
              { requiresSecondStep: checked },
              {
                onSuccess: () =>
                  showToast({
                    tone: 'done',
                    text: checked
                      ? 'Two-step sign-in is required here now.'
                      : 'Two-step sign-in is up to each person now.',
                  }),
              },
            )
          }
        />
      </CellGrid>
      <p className="mt-8 text-base text-ink-2">
        {withoutSecondStep === 0
          ? 'Everybody here has it.'
          : `${withoutSecondStep} ${withoutSecondStep === 1 ? 'person has' : 'people have'} not set it up; People says who.`}
      </p>
      {change.error !== null && (
        <ErrorNotice className="mt-10">
          {change.error.message}
          {asApiError(change.error).code === 'conflict' && (
            <>
              {' '}
              <Link to="/account/two-step" className="text-blue underline">
                Set up two-step sign-in
              </Link>
            </>
          )}
        </ErrorNotice>
      )}
    </SettingsSection>
  );
}
