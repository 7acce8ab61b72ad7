export { ReviewBatchById } from './components/review-batch'
