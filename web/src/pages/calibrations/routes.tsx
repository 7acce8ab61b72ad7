import type { RouteObject } from 'react-router-dom'

export const calibrationsRoutes: RouteObject[] = [
  {
    path: 'calibrations',
    handle: { needs: 'calibrations.read' },
    lazy: async () => ({ Component: (await import('./calibrations-page')).CalibrationsPage }),
  },
  {
    path: 'calibrations/new',
    handle: { needs: 'calibrations.prepare' },
    lazy: async () => ({ Component: (await import('./new-calibration-page')).NewCalibrationPage }),
  },
  {
    path: 'calibrations/:id',
    handle: { needs: 'calibrations.read' },
    lazy: async () => ({ Component: (await import('./calibration-page')).CalibrationPage }),
  },
]
