import type { Action } from '@weirlight/shared/permissions'
import type { RouteObject } from 'react-router-dom'
import { paths } from '../lib/paths'
import { alertsRoutes } from '../pages/alerts/routes'
import { batchesRoutes } from '../pages/batches/routes'
import { benchRoutes } from '../pages/bench/routes'
import { calibrationsRoutes } from '../pages/calibrations/routes'
import { certificatesRoutes } from '../pages/certificates/routes'
import { chartsRoutes } from '../pages/charts/routes'
import { historyRoutes } from '../pages/history/routes'
import { receivingRoutes } from '../pages/receiving/routes'
import { resultsRoutes } from '../pages/results/routes'
import { reviewRoutes } from '../pages/review/routes'
import { settingsRoutes } from '../pages/settings/routes'

export type Count = 'receiving' | 'review' | 'alerts' | 'calibrations' | 'batches'

export interface Area {
  title: string
  to: string
  needs: Action
  routes: readonly RouteObject[]
  count?: Count
  /** its count is loud */
  isHot?: boolean
  /** a thin line before it */
  opensGroup?: boolean
}

/** The way of the water: the order of the work, from left to right. */
export const AREAS: readonly Area[] = [
  {
    title: 'Receiving',
    to: paths.receiving,
    needs: 'samples.read',
    routes: receivingRoutes,
    count: 'receiving',
    opensGroup: true,
  },
  { title: 'Bench', to: paths.bench, needs: 'methods.read', routes: benchRoutes },
  {
    title: 'Calibrations',
    to: paths.calibrations,
    needs: 'calibrations.read',
    routes: calibrationsRoutes,
    count: 'calibrations',
  },
  { title: 'Batches', to: paths.batches, needs: 'batches.read', routes: batchesRoutes, count: 'batches' },
  { title: 'Review', to: paths.review, needs: 'batches.read', routes: reviewRoutes, count: 'review' },
  { title: 'Results', to: paths.results, needs: 'results.read', routes: resultsRoutes },
  {
    title: 'Alerts',
    to: paths.alerts,
    needs: 'alerts.read',
    routes: alertsRoutes,
    count: 'alerts',
    isHot: true,
  },
  { title: 'Certificates', to: paths.certificates, needs: 'certificates.read', routes: certificatesRoutes },
  { title: 'Charts', to: paths.charts, needs: 'charts.read', routes: chartsRoutes, opensGroup: true },
  { title: 'History', to: paths.history, needs: 'history.read', routes: historyRoutes },
  { title: 'Settings', to: paths.settings, needs: 'laboratory.read', routes: settingsRoutes },
]
