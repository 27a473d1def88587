import { problems } from '#schemas/vocabulary/problems.ts';
import type { RouteDeclaration } from './route.ts';

const problemSchema = {
  type: 'object',
  required: ['type', 'title', 'status', 'slug', 'detail'],
  properties: {
    type: { type: 'string' },
    title: { type: 'string' },
    status: { type: 'integer' },
    slug: { enum: Object.keys(problems) },
    detail: { type: 'string' },
    errors: {
      type: 'array',
      items: {
        type: 'object',
        required: ['pointer', 'detail'],
        properties: { pointer: { type: 'string' }, detail: { type: 'string' } },
      },
    },
    requestId: { type: 'string' },
  },
} as const;

const parameterName = /:([A-Za-z]+)/g;

function operation(route: RouteDeclaration): object {
  const pathParameters = [...route.path.matchAll(parameterName)].map(([, name]) => ({
    name,
    in: 'path',
    required: true,
    schema: { type: 'string' },
  }));
  const query = (route.query ?? {}) as { properties?: Record<string, object>; required?: string[] };
  const queryParameters = Object.entries(query.properties ?? {}).map(([name, schema]) => ({
    name,
    in: 'query',
    required: query.required?.includes(name) ?? false,
    schema,
  }));
  const { status, body } = route.responds;
  return {
    summary: route.summary,
    'x-gate': route.gate,
    'x-acts': route.acts ?? [],
    parameters: [...pathParameters, ...queryParameters],
    ...(route.body === undefined
      ? {}
      : { requestBody: { required: true, content: { 'application/json': { schema: route.body } } } }),
    responses: {
      [status]: {
        description: 'As asked.',
        ...(body === null ? {} : { content: { 'application/json': { schema: body } } }),
      },
      default: {
        description: 'A refusal, as RFC 9457 problem details.',
        content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
      },
    },
  };
}

/** The OpenAPI 3.1 document of the declared routes; its schema dialect is JSON Schema 2020-12. */
export function openApiDocument(routes: readonly RouteDeclaration[], version: string): object {
  const paths: Record<string, Record<string, object>> = {};
  for (const route of routes) {
    const path = route.path.replace(parameterName, '{$1}');
    (paths[path] ??= {})[route.method] = operation(route);
  }
  return {
    openapi: '3.1.1',
    jsonSchemaDialect: 'https://json-schema.org/draft/2020-12/schema',
    info: { title: 'Vesselry', version, description: 'For research under an approved protocol.' },
    servers: [{ url: '/api/v1' }],
    paths,
    components: { schemas: { Problem: problemSchema } },
  };
}
