import type { CalibrationDraft } from '../draft/calibration-draft'

export const MODEL_WORDS: Record<CalibrationDraft['model'], string> = {
  linear: 'Line',
  'linear-through-origin': 'Line through the origin',
  quadratic: 'Parabola',
}
export const WEIGHTING_WORDS: Record<CalibrationDraft['weighting'], string> = {
  none: 'none',
  'inverse-concentration': '1 / concentration',
  'inverse-concentration-squared': '1 / concentration²',
}
