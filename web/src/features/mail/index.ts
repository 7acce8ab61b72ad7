export { DeliveriesTable } from './components/deliveries-table'
export { MailList } from './components/mail-list'
