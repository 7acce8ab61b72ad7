export { MethodById } from './components/method-page'
export { MethodsList } from './components/methods-list'
export { methodQuery, methodsQuery, recordOf, type MethodRow, type MethodView } from './api/method-queries'
export { approvalMark } from './method-words'
