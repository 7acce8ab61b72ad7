export { AddClient } from './components/client-form'
export { ClientById } from './components/client-page'
export { ClientsList } from './components/clients-list'
export {
  clientQuery,
  clientsQuery,
  type ClientRow,
  type ClientView,
  type SamplingPoint,
} from './api/client-queries'
