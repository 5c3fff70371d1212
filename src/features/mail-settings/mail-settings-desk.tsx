import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { CellGrid } from '../../components/cell.tsx';
import { ChoiceCell, SelectCell } from '../../components/field-cells.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { ReadingState } from '../../components/reading-state.tsx';
import {
  mailSettingsSchema,
  notificationKinds,
  type MailSettings,
  type MailTiming,
  type NotificationKind,
} from '../../contract/mail-settings.ts';
import { callApi } from '../../lib/api-client.ts';
import { timeZoneName } from '../../lib/format-time.ts';

const path = '/api/account/mail';

const mailSettingsQuery = queryOptions({
  queryKey: ['mail-settings'],
  queryFn: ({ signal }) => callApi(mailSettingsSchema, path, { signal }),
});

const kindWords: Readonly<Record<NotificationKind, string>> = {
  mention: 'Somebody mentions me in a comment',
  reviewAsked: 'Somebody asks me to review a design',
  decision: 'A design I asked about is approved or sent back',
  shareOpened: 'A customer opens what I shared',
};
const timings: readonly { readonly value: MailTiming; readonly label: string }[] = [
  { value: 'at-once', label: 'At once' },
  { value: 'daily', label: 'Once a day' },
  { value: 'none', label: 'No mail' },
];

/** What the reader wants to be told by mail, and when. Each choice counts as it is made. */
export function MailSettingsDesk() {
  const query = useQuery(mailSettingsQuery);
  const queryClient = useQueryClient();
  const { queryKey } = mailSettingsQuery;
  const save = useMutation({
    mutationFn: (settings: MailSettings) =>
      callApi(mailSettingsSchema, path, { method: 'PUT', body: settings }),
    // Shown at once; what was refused comes back as it is kept.
    onMutate: (settings) => queryClient.setQueryData(queryKey, settings),
    onError: () => queryClient.invalidateQueries({ queryKey }),
    scope: { id: 'mail-settings' },
  });
  const settings = query.data;
  if (settings === undefined) return <ReadingState what="Your wishes" query={query} />;
  const change = (wish: Partial<MailSettings>): void => save.mutate({ ...settings, ...wish });
  const own = timeZoneName();
  return (
    <div className="flex flex-col gap-14">
      <CellGrid>
        {notificationKinds.map((kind) => (
          <ChoiceCell
            key={kind}
            label={kindWords[kind]}
            value={settings[kind]}
            options={timings}
            onChange={(timing) => change({ [kind]: timing })}
          />
        ))}
        <SelectCell
          label="The mail of the day comes at 07:00 in"
          value={settings.timeZone}
          options={zonesWith(settings.timeZone, own).map((zone) => ({ value: zone, label: zone }))}
          onChange={(timeZone) => change({ timeZone })}
          hint={
            settings.timeZone === own
              ? 'Nothing happened, no mail.'
              : `Nothing happened, no mail. This browser’s own zone is ${own}.`
          }
        />
      </CellGrid>
      {save.error !== null && <ErrorNotice>Not saved. {save.error.message}</ErrorNotice>}
      <p role="status" className="text-note text-ink-3">
        {save.isPending ? 'Saving…' : save.isSuccess ? 'Saved' : ''}
      </p>
    </div>
  );
}

/** Every zone that the browser knows; UTC, the kept one and its own first. */
function zonesWith(kept: string, own: string): readonly string[] {
  return [...new Set(['UTC', own, kept, ...Intl.supportedValuesOf('timeZone')])];
}
