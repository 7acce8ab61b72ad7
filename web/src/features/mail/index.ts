export { MailList } from './components/mail-list'
