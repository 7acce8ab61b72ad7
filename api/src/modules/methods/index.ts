export { MethodsModule } from './methods.module.js'
export { MethodsService } from './methods.service.js'
export { loadMethods } from './load-methods.js'
