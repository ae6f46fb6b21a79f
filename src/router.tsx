import { createBrowserRouter, Navigate } from 'react-router-dom';
import { RequireSession } from './routes/RequireSession';
import { RouteError } from './routes/RouteError';

/** Every page; each is its own chunk. Live state is never in the address, so navigation can never hold it up. */
export const router = createBrowserRouter([
  {
    errorElement: <RouteError />,
    hydrateFallbackElement: <p className="paper">Opening Elbowroom…</p>,
    children: [
      { path: '/sign-in', lazy: () => import('./routes/SignIn') },
      { path: '/first-owner', lazy: () => import('./routes/FirstOwner') },
      { path: '/invitation', lazy: () => import('./routes/Invitation') },
      {
        element: <RequireSession />,
        children: [
          {
            lazy: () => import('./routes/WorkshopLayout'),
            children: [
              { path: '/', lazy: () => import('./routes/Arms') },
              { path: '/team', lazy: () => import('./routes/Team') },
              { path: '/outbox', lazy: () => import('./routes/Outbox') },
              { path: '/audit', lazy: () => import('./routes/Audit') },
              { path: '/settings', lazy: () => import('./routes/Settings') },
            ],
          },
          {
            path: '/arms/:armId',
            lazy: () => import('./routes/ArmLayout'),
            children: [
              { index: true, element: <Navigate to="move" replace /> },
              { path: 'move', lazy: () => import('./routes/Move') },
              { path: 'glance', lazy: () => import('./routes/Glance') },
              { path: 'poses', lazy: () => import('./routes/Poses') },
              { path: 'sequences', lazy: () => import('./routes/Sequences') },
              { path: 'sequences/:sequenceId', lazy: () => import('./routes/Sequence') },
              { path: 'runs', lazy: () => import('./routes/Runs') },
              { path: 'runs/:runId', lazy: () => import('./routes/Runs') },
              { path: 'build', lazy: () => import('./routes/Build') },
            ],
          },
        ],
      },
      { path: '*', lazy: () => import('./routes/NotFound') },
    ],
  },
]);
