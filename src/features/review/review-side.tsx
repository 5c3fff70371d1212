import { useQuery } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { CellGrid, ReadCell } from '../../components/cell.tsx';
import { severities, SeverityShape, severityWords } from '../../components/severity-mark.tsx';
import { countBySeverity } from '../../engine/rules/run-rules.ts';
import { designPath } from '../../lib/workspace-path.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { commentsQuery } from '../../workspace/comments-query.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';

/** What has to be looked at before a decision: findings, waivers, threads, suggestions. */
export function ReviewSide({ children }: { readonly children?: ReactNode }) {
  const { designId } = useDesignPlace();
  const { openFindings, waived } = useChecks();
  const { data } = useQuery(commentsQuery(designId));
  const open = (data?.threads ?? []).filter(({ resolvedAt }) => resolvedAt === null);
  const suggestions = open.filter(({ comments }) =>
    comments.some(({ suggestion }) => suggestion !== null && suggestion.appliedAt === null),
  ).length;
  const counts = countBySeverity(openFindings);
  const path = designPath(designId);
  return (
    <div className="flex flex-col gap-12">
      {children}
      <CellGrid columns={3}>
        {severities.map((severity) => (
          <ReadCell key={severity} label={severityWords[severity]}>
            <Link
              to={`${path}/checks?severity=${severity}&waivers=open`}
              className="inline-flex items-center gap-6 hover:underline"
            >
              <SeverityShape severity={severity} />
              {counts[severity]}
            </Link>
          </ReadCell>
        ))}
        <ReadCell label="Waived">
          <Link to={`${path}/checks?waivers=waived`} className="hover:underline">
            {waived.covered.length}
          </Link>
        </ReadCell>
        <ReadCell label="Waivers lapsed">{waived.lapsed.length}</ReadCell>
        <ReadCell label="Threads open">{open.length}</ReadCell>
        <ReadCell label="Suggestions open" span={3}>
          {suggestions}
        </ReadCell>
      </CellGrid>
    </div>
  );
}
