export { PortalModule } from './portal.module.js'
