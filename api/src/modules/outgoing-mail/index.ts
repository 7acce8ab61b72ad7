export { OutgoingMailModule } from './outgoing-mail.module.js'
