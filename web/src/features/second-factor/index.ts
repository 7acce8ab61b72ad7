export { OwnSecondFactor } from './components/own-second-factor'
