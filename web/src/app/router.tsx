import { createBrowserRouter, type RouteObject } from 'react-router-dom'
import { accountRoutes } from '../pages/account/routes'
import { checkRoutes } from '../pages/check/routes'
import { portalRoutes } from '../pages/portal/routes'
import { todayRoutes } from '../pages/today/routes'
import { AREAS } from './areas'
import { PageFault } from './page-fault'
import { Opening, Root } from './root'
import { NotFoundPage } from '../ui/page-states'
import { HomePage } from './small-pages'
import { SignedIn } from './signed-in'

const door: RouteObject[] = [
  {
    path: 'sign-in',
    lazy: async () => ({ Component: (await import('../pages/door/sign-in-page')).SignInPage }),
  },
  {
    path: 'forgot',
    lazy: async () => ({ Component: (await import('../pages/door/forgot-page')).ForgotPage }),
  },
  {
    path: 'reset/:token',
    lazy: async () => ({ Component: (await import('../pages/door/reset-page')).ResetPage }),
  },
  {
    path: 'invitation/:token',
    lazy: async () => ({ Component: (await import('../pages/door/invitation-page')).InvitationPage }),
  },
]

/** The component library, loaded with the first page that needs it. */
const withKit = (children: RouteObject[]): RouteObject => ({
  lazy: async () => ({ Component: (await import('./kit-frame')).KitFrame }),
  children: [{ ErrorBoundary: PageFault, children }],
})

export function makeRouter() {
  return createBrowserRouter([
    {
      Component: Root,
      ErrorBoundary: PageFault,
      HydrateFallback: Opening,
      children: [
        { ErrorBoundary: PageFault, children: door },
        { handle: { isPublic: true }, ...withKit(checkRoutes) },
        {
          Component: SignedIn,
          children: [
            { index: true, Component: HomePage },
            { ErrorBoundary: PageFault, children: todayRoutes },
            withKit([...AREAS.flatMap((area) => area.routes), ...portalRoutes, ...accountRoutes]),
            { path: '*', Component: NotFoundPage },
          ],
        },
      ],
    },
  ])
}
