import { endpoints } from '@weirlight/shared/contracts'
import { describe, expect, it } from 'vitest'
import { openApiDocument } from './openapi.js'

type Operation = { operationId: string; parameters: { name: string; in: string }[]; requestBody?: unknown }

describe('the published description of the API', () => {
  const paths = openApiDocument().paths as Record<string, Record<string, Operation>>

  it('has every endpoint once, under its method and path', () => {
    const published = Object.entries(paths).flatMap(([path, methods]) =>
      Object.entries(methods).map(([method, { operationId }]) => `${operationId} ${method} ${path}`),
    )
    const stated = endpoints.map(
      ({ name, method, path }) => `${name} ${method.toLowerCase()} /api${path.replaceAll(/:(\w+)/g, '{$1}')}`,
    )
    expect(published.sort()).toEqual(stated.sort())
  })

  it('names every parameter of a path, and a body where one is taken', () => {
    for (const { name, path, method, body, upload } of endpoints) {
      const operation = paths[`/api${path.replaceAll(/:(\w+)/g, '{$1}')}`]?.[method.toLowerCase()]
      const inPath = operation?.parameters.filter((one) => one.in === 'path').map((one) => one.name) ?? []
      expect(inPath.sort(), name).toEqual([...path.matchAll(/:(\w+)/g)].map(([, found]) => found).sort())
      expect(operation?.requestBody !== undefined, name).toBe(body !== undefined || upload === true)
    }
  })
})
