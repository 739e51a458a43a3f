import { createBrowserRouter, Navigate } from 'react-router';
import { SignInPage } from './account/sign-in-page.tsx';
import { SignUpPage } from './account/sign-up-page.tsx';
import { EventPage } from './event/event-page.tsx';
import { ErrorPage, NotFoundPage } from './shell/error-page.tsx';
import { Shell } from './shell/shell.tsx';

/** One page a subject. What draws charts or replays journals is fetched when its page is opened (and precached anyway). */
export function createRouter() {
  return createBrowserRouter([
    {
      errorElement: <ErrorPage />,
      hydrateFallbackElement: <></>,
      children: [
        { path: '/sign-in', element: <SignInPage /> },
        { path: '/sign-up', element: <SignUpPage /> },
        { path: '/device', lazy: async () => ({ Component: (await import('./device/device-page.tsx')).DevicePage }) },
        { path: '/device/:runId', lazy: async () => ({ Component: (await import('./device/device-run-page.tsx')).DeviceRunPage }) },
        {
          element: <Shell />,
          children: [
            { path: '/', element: <Navigate to="/event" replace /> },
            { path: '/event/:eventId?', element: <EventPage /> },
            { path: '/plan/:attemptId?', lazy: async () => ({ Component: (await import('./plan/plan-page.tsx')).PlanPage }) },
            { path: '/garage', lazy: async () => ({ Component: (await import('./garage/garage-page.tsx')).GaragePage }) },
            { path: '/runs', lazy: async () => ({ Component: (await import('./runs/runs-page.tsx')).RunsPage }) },
            { path: '/runs/:runId', lazy: async () => ({ Component: (await import('./runs/run-page.tsx')).RunPage }) },
            { path: '/team', lazy: async () => ({ Component: (await import('./team/team-page.tsx')).TeamPage }) },
          ],
        },
        { path: '*', element: <NotFoundPage /> },
      ],
    },
  ]);
}
