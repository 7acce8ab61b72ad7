import { Injectable, Logger, RequestMethod, type OnApplicationBootstrap } from '@nestjs/common'
import { METHOD_METADATA, PATH_METADATA } from '@nestjs/common/constants.js'
import { DiscoveryService, MetadataScanner, Reflector } from '@nestjs/core'
import { endpoints, type Endpoint as Contract } from '@weirlight/shared/contracts'
import { CONTRACT } from './endpoint.decorator.js'

export interface RouteCheckOptions {
  isStrict: boolean
}

/** The application does not start when a route has no contract, or a contract has no route or two. */
@Injectable()
export class RouteCheck implements OnApplicationBootstrap {
  private readonly logger = new Logger(RouteCheck.name)

  constructor(
    private readonly discovery: DiscoveryService,
    private readonly scanner: MetadataScanner,
    private readonly reflector: Reflector,
    private readonly options: RouteCheckOptions,
  ) {}

  onApplicationBootstrap(): void {
    const { undeclared, served } = this.routes()
    if (undeclared.length > 0) throw new Error(`Routes without a contract: ${undeclared.join(', ')}.`)
    const count = new Map<string, number>()
    for (const { name } of served) count.set(name, (count.get(name) ?? 0) + 1)
    const known = new Set(endpoints.map(({ name }) => name))
    const problems = [
      ...[...count].filter(([, n]) => n > 1).map(([name]) => `${name} has more than one route`),
      ...[...count]
        .filter(([name]) => !known.has(name))
        .map(([name]) => `${name} is not listed in endpoints`),
      ...endpoints.filter(({ name }) => !count.has(name)).map(({ name }) => `${name} has no route`),
    ]
    if (problems.length === 0) return
    if (this.options.isStrict) throw new Error(`Contracts and routes differ: ${problems.join('; ')}.`)
    this.logger.debug(`Contracts and routes differ: ${problems.join('; ')}.`)
  }

  routes(): { undeclared: string[]; served: Contract[] } {
    const undeclared: string[] = []
    const served: Contract[] = []
    for (const wrapper of this.discovery.getControllers()) {
      const instance: unknown = wrapper.instance
      if (typeof instance !== 'object' || instance === null) continue
      const methods = instance as Record<string, (...args: unknown[]) => unknown>
      for (const name of this.scanner.getAllMethodNames(Object.getPrototypeOf(instance) as object | null)) {
        const method = methods[name]
        if (!method || !Reflect.hasMetadata(PATH_METADATA, method)) continue
        const contract = this.reflector.get<Contract | undefined>(CONTRACT, method)
        if (contract) served.push(contract)
        else {
          const verb = RequestMethod[Reflect.getMetadata(METHOD_METADATA, method) as number] ?? ''
          undeclared.push(
            `${wrapper.name}.${name} (${verb} ${String(Reflect.getMetadata(PATH_METADATA, method))})`,
          )
        }
      }
    }
    return { undeclared, served }
  }
}
