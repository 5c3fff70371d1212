import type { RouteObject } from 'react-router-dom';
import { PageError } from './page-error.tsx';
import { SignedInOnly } from './signed-in-only.tsx';
import { StartPage } from './start-page.tsx';
import { Root } from './root.tsx';

/** Every address of the application. Pages are loaded when they are first gone to, each with a boundary of its own. */
export const routes: RouteObject[] = [
  {
    element: <Root />,
    ErrorBoundary: PageError,
    HydrateFallback: () => null,
    children: [
      {
        path: 'sign-in',
        ErrorBoundary: PageError,
        lazy: async () => ({ Component: (await import('../pages/sign-in-page.tsx')).SignInPage }),
      },
      {
        path: 'invitation/:token',
        ErrorBoundary: PageError,
        lazy: async () => ({ Component: (await import('../pages/invitation-page.tsx')).InvitationPage }),
      },
      {
        path: 'share/:token',
        ErrorBoundary: PageError,
        lazy: async () => ({ Component: (await import('../pages/shared-page.tsx')).SharedPage }),
      },
      {
        path: 'reset',
        ErrorBoundary: PageError,
        lazy: async () => ({ Component: (await import('../pages/ask-for-reset-page.tsx')).AskForResetPage }),
      },
      {
        path: 'reset/:token',
        ErrorBoundary: PageError,
        lazy: async () => ({ Component: (await import('../pages/new-password-page.tsx')).NewPasswordPage }),
      },
      {
        path: 'first-owner',
        ErrorBoundary: PageError,
        lazy: async () => ({ Component: (await import('../pages/first-owner-page.tsx')).FirstOwnerPage }),
      },
      {
        lazy: async () => ({ Component: (await import('./shell.tsx')).Shell }),
        children: [
          {
            path: 'wire',
            ErrorBoundary: PageError,
            lazy: async () => ({ Component: (await import('../pages/wire-page.tsx')).WirePage }),
          },
        ],
      },
      {
        element: <SignedInOnly />,
        children: [
          {
            lazy: async () => ({ Component: (await import('./shell.tsx')).Shell }),
            children: [
              { index: true, element: <StartPage /> },
              {
                path: 'workspaces/:workspaceId/engagements',
                ErrorBoundary: PageError,
                lazy: async () => ({
                  Component: (await import('../pages/engagements-page.tsx')).EngagementsPage,
                }),
              },
              {
                path: 'workspaces/:workspaceId/profiles',
                ErrorBoundary: PageError,
                lazy: async () => ({
                  Component: (await import('../pages/profiles-page.tsx')).ProfilesPage,
                }),
              },
              {
                path: 'workspaces/:workspaceId/people',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/people-page.tsx')).PeoplePage }),
              },
              {
                path: 'workspaces/:workspaceId/activity',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/activity-page.tsx')).ActivityPage }),
              },
              {
                path: 'workspaces/:workspaceId/settings',
                ErrorBoundary: PageError,
                lazy: async () => ({
                  Component: (await import('../pages/workspace-settings-page.tsx')).WorkspaceSettingsPage,
                }),
              },
              {
                path: 'designs/:designId/revisions/:revisionId',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/revision-page.tsx')).RevisionPage }),
              },
              {
                path: 'designs/:designId',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/design-page.tsx')).DesignPage }),
                children: [
                  {
                    index: true,
                    ErrorBoundary: PageError,
                    lazy: async () => ({ Component: (await import('../pages/sheet-page.tsx')).SheetPage }),
                  },
                  {
                    path: 'segments',
                    ErrorBoundary: PageError,
                    lazy: async () => ({
                      Component: (await import('../pages/segments-page.tsx')).SegmentsPage,
                    }),
                  },
                  {
                    path: 'shares',
                    ErrorBoundary: PageError,
                    lazy: async () => ({ Component: (await import('../pages/shares-page.tsx')).SharesPage }),
                  },
                  {
                    path: 'checks',
                    ErrorBoundary: PageError,
                    lazy: async () => ({
                      Component: (await import('../pages/design-checks-page.tsx')).DesignChecksPage,
                    }),
                  },
                  {
                    path: 'review',
                    ErrorBoundary: PageError,
                    lazy: async () => ({
                      Component: (await import('../pages/review-page.tsx')).ReviewPage,
                    }),
                  },
                  {
                    path: 'history',
                    ErrorBoundary: PageError,
                    lazy: async () => ({
                      Component: (await import('../pages/history-page.tsx')).HistoryPage,
                    }),
                  },
                  {
                    path: 'numbering',
                    ErrorBoundary: PageError,
                    lazy: async () => ({
                      Component: (await import('../pages/numbering-page.tsx')).NumberingPage,
                    }),
                  },
                ],
              },
              {
                path: 'checks',
                ErrorBoundary: PageError,
                lazy: async () => ({
                  Component: (await import('../pages/checks-reference-page.tsx')).ChecksReferencePage,
                }),
              },
              {
                path: 'http-api',
                ErrorBoundary: PageError,
                lazy: async () => ({
                  Component: (await import('../pages/api-reference-page.tsx')).ApiReferencePage,
                }),
              },
              {
                path: 'workspaces/:workspaceId/mailbox',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/mailbox-page.tsx')).MailboxPage }),
              },
              {
                path: 'account/mail',
                ErrorBoundary: PageError,
                lazy: async () => ({
                  Component: (await import('../pages/mail-settings-page.tsx')).MailSettingsPage,
                }),
              },
              {
                path: 'account/password',
                ErrorBoundary: PageError,
                lazy: async () => ({
                  Component: (await import('../pages/change-password-page.tsx')).ChangePasswordPage,
                }),
              },
              {
                path: 'account/two-step',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/two-step-page.tsx')).TwoStepPage }),
              },
              {
                path: 'account/sessions',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/sessions-page.tsx')).SessionsPage }),
              },
              {
                path: 'account/tokens',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/tokens-page.tsx')).TokensPage }),
              },
              {
                path: 'account/deletion',
                ErrorBoundary: PageError,
                lazy: async () => ({
                  Component: (await import('../pages/delete-account-page.tsx')).DeleteAccountPage,
                }),
              },
              {
                path: '*',
                ErrorBoundary: PageError,
                lazy: async () => ({ Component: (await import('../pages/not-found-page.tsx')).NotFoundPage }),
              },
            ],
          },
        ],
      },
    ],
  },
];
