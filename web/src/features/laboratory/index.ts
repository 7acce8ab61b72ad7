export { LaboratoryParticulars } from './components/laboratory-particulars'
