import { createBrowserRouter, redirect } from 'react-router-dom';
import { LoadingState } from '../components/states';
import { goHome, requireSession } from './guards';
import { paths, patterns } from './paths';
import { RouteError } from './route-error';

/** Where an unknown opens: on its runs once there are any, else on its evidence. */
async function openUnknown(unknownId: string) {
  const { unknownStart } = await import('../features/unknowns/api/unknown-start');
  return redirect((await unknownStart(unknownId)) === 'runs' ? paths.unknownRuns(unknownId) : paths.unknownEvidence(unknownId));
}

export const router = createBrowserRouter([
  {
    errorElement: <RouteError />,
    hydrateFallbackElement: <LoadingState />,
    children: [
      { path: patterns.signIn, lazy: () => import('../features/session/routes/sign-in-page') },
      { path: patterns.requestReset, lazy: () => import('../features/session/routes/request-reset-page') },
      { path: patterns.reset, lazy: () => import('../features/session/routes/reset-page') },
      { path: patterns.invitation, lazy: () => import('../features/session/routes/invitation-page') },
      {
        id: 'shell',
        loader: requireSession,
        // The person is asked for once; pages reload their own data.
        shouldRevalidate: () => false,
        lazy: () => import('./app-shell'),
        children: [
          {
            errorElement: <RouteError />,
            children: [
              { path: '/', loader: goHome },
              { path: patterns.unknowns, lazy: () => import('../features/unknowns/routes/unknowns-page') },
              {
                path: patterns.unknown,
                lazy: () => import('../features/unknowns/routes/unknown-page'),
                children: [
                  {
                    errorElement: <RouteError />,
                    children: [
                      { index: true, loader: ({ params }) => openUnknown(params['unknownId'] ?? '') },
                      { path: 'evidence', lazy: () => import('../features/evidence/routes/evidence-page') },
                      { path: 'revisions', lazy: () => import('../features/evidence/routes/revisions-page') },
                      { path: 'runs', lazy: () => import('../features/runs/routes/unknown-runs') },
                      { path: 'shortlist', lazy: () => import('../features/shortlist/routes/shortlist-page') },
                      { path: 'comments', lazy: () => import('../features/unknowns/routes/comments-page') },
                    ],
                  },
                ],
              },
              { path: patterns.runs, lazy: () => import('../features/runs/routes/runs-page') },
              { path: patterns.run, lazy: () => import('../features/ranking/routes/ranking-page') },
              { path: patterns.candidate, lazy: () => import('../features/candidate/routes/candidate-page') },
              { path: patterns.fragments, lazy: () => import('../features/fragments/routes/fragments-page') },
              { path: patterns.predict, lazy: () => import('../features/prediction/routes/prediction-page') },
              { path: patterns.team, lazy: () => import('../features/team/routes/team-page') },
              { path: patterns.adminPeople, lazy: () => import('../features/admin/routes/people-page') },
              { path: patterns.adminAudit, lazy: () => import('../features/admin/routes/audit-page') },
              { path: patterns.account, lazy: () => import('../features/settings/routes/account-page') },
              {
                path: '*',
                loader: () => {
                  throw new Response(null, { status: 404 });
                },
              },
            ],
          },
        ],
      },
    ],
  },
]);
