import { z } from 'zod';
import { operations, type Operation } from '~/schemas/operations.ts';

const problem = {
  type: 'object',
  required: ['type', 'title', 'status', 'detail', 'errors'],
  properties: {
    type: { type: 'string' }, title: { type: 'string' }, status: { type: 'integer' }, detail: { type: 'string' },
    errors: { type: 'array', items: { type: 'object', required: ['path', 'message'], properties: { path: { type: 'string' }, message: { type: 'string' } } } },
  },
};

const jsonSchema = (schema: z.ZodType, io: 'input' | 'output'): Record<string, unknown> => {
  const { $schema: _, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: 'any' }) as Record<string, unknown>;
  return rest;
};

function parameters(operation: Operation): object[] {
  const inPath = [...operation.path.matchAll(/\{(\w+)\}/g)].map((match) => ({ name: match[1], in: 'path', required: true, schema: { type: 'string' } }));
  if (!operation.query) return inPath;
  const query = jsonSchema(operation.query, 'input') as { properties?: Record<string, unknown>; required?: string[] };
  return [...inPath, ...Object.entries(query.properties ?? {}).map(([name, schema]) => ({ name, in: 'query', required: query.required?.includes(name) ?? false, schema }))];
}

function describe(operation: Operation): object {
  const answer = operation.answer
    ? { description: 'The answer', content: { [operation.answerType ?? 'application/json']: { schema: jsonSchema(operation.answer, 'output') } } }
    : { description: 'The answer' };
  return {
    summary: operation.summary,
    ...(operation.signedIn ? { security: [{ session: [] }] } : {}),
    parameters: parameters(operation),
    ...(operation.body ? { requestBody: { required: true, content: { 'application/json': { schema: jsonSchema(operation.body, 'input') } } } } : {}),
    responses: { 200: answer, default: { description: 'A problem (RFC 9457)', content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } } } },
  };
}

/** The OpenAPI 3.1 document of every endpoint, made from the zod schemas. */
export function openApi(origin: string): object {
  const described: Record<string, Record<string, object>> = {};
  for (const operation of operations) (described[operation.path] ??= {})[operation.method] = describe(operation);
  return {
    openapi: '3.1.0',
    info: { title: 'Skidway', version: '1', description: 'Log estimates, sawing plans, listings, and the deeds of the market. Units stand in the names.' },
    servers: [{ url: origin }],
    paths: described,
    components: { schemas: { Problem: problem }, securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'skidway_session' } } },
  };
}
