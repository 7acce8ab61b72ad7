export { ClientsModule } from './clients.module.js'
export { ClientsService } from './clients.service.js'
export type { ContactView } from './contacts.repository.js'
export { ContactsService } from './contacts.service.js'
