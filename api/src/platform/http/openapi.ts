import { endpoints, type Endpoint } from '@weirlight/shared/contracts'
import { PROBLEM_STATUS } from '@weirlight/shared/errors'
import type { OpenAPIObject } from '@nestjs/swagger'
import { z } from 'zod'

type Json = Record<string, unknown>

/** OpenAPI 3.1 of every contract; the contracts are its only source. */
export function openApiDocument(contracts: readonly Endpoint[] = endpoints): OpenAPIObject {
  const paths: Record<string, Json> = {}
  for (const contract of contracts) {
    const path = `/api${contract.path.replaceAll(/:(\w+)/g, '{$1}')}`
    paths[path] = { ...paths[path], [contract.method.toLowerCase()]: operation(contract) }
  }
  const document: Json = {
    openapi: '3.1.0',
    info: {
      title: 'Weirlight',
      version: '1',
      description:
        'Changing requests carry the header x-weirlight: 1. Refusals are RFC 9457 problem documents.',
    },
    paths,
    components: {
      schemas: { Problem: PROBLEM },
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'weirlight' } },
    },
  }
  return document as unknown as OpenAPIObject
}

function schemaOf(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _, ...json } = z.toJSONSchema(schema, {
    io,
    unrepresentable: 'any',
    reused: 'inline',
  }) as Json
  return json
}

function parametersOf(schema: z.ZodType | undefined, place: 'path' | 'query'): Json[] {
  if (!schema) return []
  const json = schemaOf(schema, 'input')
  const required = new Set((json['required'] as string[] | undefined) ?? [])
  return Object.entries((json['properties'] as Json | undefined) ?? {}).map(([name, value]) => ({
    name,
    in: place,
    required: place === 'path' || required.has(name),
    schema: value,
  }))
}

function bodyOf(contract: Endpoint): Json {
  if (contract.upload) {
    const file = {
      type: 'object',
      required: ['file'],
      properties: { file: { type: 'string', format: 'binary' } },
    }
    return { requestBody: { required: true, content: { 'multipart/form-data': { schema: file } } } }
  }
  if (!contract.body) return {}
  const schema = schemaOf(contract.body, 'input')
  return { requestBody: { required: true, content: { 'application/json': { schema } } } }
}

function answerOf(contract: Endpoint): Json {
  if (contract.file) {
    const content = Object.fromEntries(
      contract.file.map((type) => [type, { schema: { type: 'string', format: 'binary' } }]),
    )
    return { '200': { description: 'The file', content } }
  }
  if (!contract.response) return { '204': { description: 'Done' } }
  const schema = schemaOf(contract.response, 'output')
  return { '200': { description: 'Done', content: { 'application/json': { schema } } } }
}

function operation(contract: Endpoint): Json {
  const isPublic = contract.permission === 'public'
  return {
    operationId: contract.name,
    summary: contract.summary,
    tags: [contract.path.split('/')[1] ?? ''],
    'x-permission': contract.permission,
    security: isPublic ? [] : [{ session: [] }],
    parameters: [...parametersOf(contract.params, 'path'), ...parametersOf(contract.query, 'query')],
    ...bodyOf(contract),
    responses: {
      ...answerOf(contract),
      default: {
        description: 'Refused',
        content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
      },
    },
  }
}

const PROBLEM: Json = {
  type: 'object',
  required: ['type', 'title', 'status', 'code', 'detail', 'requestId'],
  properties: {
    type: { type: 'string' },
    title: { type: 'string' },
    status: { type: 'integer' },
    code: { type: 'string', enum: Object.keys(PROBLEM_STATUS) },
    detail: { type: 'string' },
    requestId: { type: 'string' },
    errors: {
      type: 'array',
      items: {
        type: 'object',
        required: ['path', 'message'],
        properties: { path: { type: 'string' }, message: { type: 'string' } },
      },
    },
    conflict: {
      type: 'object',
      properties: { changedBy: { type: 'string' }, changedAt: { type: 'string', format: 'date-time' } },
    },
  },
}
