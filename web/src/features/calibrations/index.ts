export { CalibrationById } from './components/calibration-view'
export {
  AllCalibrations,
  CalibrationDrafts,
  CalibrationsInForce,
  CalibrationsSentBack,
  CalibrationsToSign,
} from './components/calibration-lists'
export { ChangeReason } from './components/change-reason'
export { ChoiceList, ChoiceSelect } from './components/choice-select'
export { CorrectionsBox } from './components/corrections-box'
export { StartCalibration } from './components/start-calibration'
export {
  calibrationQuery,
  calibrationsInState,
  materialsQuery,
  methodsQuery,
  type CalibrationRow,
} from './api/calibration-queries'
export { lotChoices, type Choice } from './draft/lots'
export { decimals, significant } from './draft/number-texts'
