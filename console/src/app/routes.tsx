import type { RouteObject } from 'react-router-dom';
import { NotFoundPage } from './not-found-page.js';
import { RouteError } from './route-error.js';
import { SignedIn } from './signed-in.js';

/** Every page is loaded when it is first gone to; each has its own boundary below the strip. */
const pages: RouteObject[] = [
  {
    index: true,
    lazy: async () => ({ Component: (await import('../features/floor/floor-page.js')).FloorPage }),
  },
  {
    path: 'rigs/:rigId',
    lazy: async () => ({ Component: (await import('../features/rigs/rig-page.js')).RigPage }),
  },
  {
    path: 'rigs/:rigId/envelope',
    lazy: async () => ({ Component: (await import('../features/envelopes/envelope-page.js')).EnvelopePage }),
  },
  {
    path: 'rigs/:rigId/wiring',
    lazy: async () => ({ Component: (await import('../features/wiring/wiring-page.js')).WiringPage }),
  },
  {
    path: 'new-rig',
    lazy: async () => ({ Component: (await import('../features/wiring/wiring-page.js')).NewRigPage }),
  },
  {
    path: 'rigs/:rigId/envelope/cause-and-effect',
    lazy: async () => ({
      Component: (await import('../features/envelopes/cause-effect/cause-effect-page.js')).CauseEffectPage,
    }),
  },
  {
    path: 'objectives',
    lazy: async () => ({
      Component: (await import('../features/objectives/objectives-page.js')).ObjectivesPage,
    }),
  },
  {
    path: 'account',
    lazy: async () => ({ Component: (await import('../features/auth/account-page.js')).AccountPage }),
  },
  {
    path: 'people',
    lazy: async () => ({ Component: (await import('../features/people/people-page.js')).PeoplePage }),
  },
  {
    path: 'adapters',
    lazy: async () => ({ Component: (await import('../features/adapters/adapters-page.js')).AdaptersPage }),
  },
  {
    path: 'experiments',
    lazy: async () => ({
      Component: (await import('../features/experiments/experiments-page.js')).ExperimentsPage,
    }),
  },
  {
    path: 'experiments/:experimentId',
    lazy: async () => ({
      Component: (await import('../features/experiments/experiment-page.js')).ExperimentPage,
    }),
  },
  {
    path: 'runs',
    lazy: async () => ({ Component: (await import('../features/runs/runs-page.js')).RunsPage }),
  },
  {
    path: 'runs/:runId',
    lazy: async () => ({ Component: (await import('../features/runs/run-page.js')).RunPage }),
  },
  { path: '*', element: <NotFoundPage /> },
];

const withBoundary = (page: RouteObject): RouteObject => ({ ...page, errorElement: <RouteError /> });

export const routes: RouteObject[] = [
  {
    path: '/sign-in',
    hydrateFallbackElement: <span />,
    errorElement: <RouteError />,
    lazy: async () => ({ Component: (await import('../features/auth/sign-in-page.js')).SignInPage }),
  },
  {
    path: '/setup',
    hydrateFallbackElement: <span />,
    errorElement: <RouteError />,
    lazy: async () => ({ Component: (await import('../features/auth/setup-page.js')).SetupPage }),
  },
  {
    path: '/',
    element: <SignedIn />,
    errorElement: <RouteError />,
    hydrateFallbackElement: <span />,
    children: pages.map(withBoundary),
  },
];
