export { AlertsModule } from './alerts.module.js'
export { AlertsService } from './alerts.service.js'
