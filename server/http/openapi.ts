import { z } from 'zod';
import { problemDetails } from '@shared/problem-details';
import type { Route } from '@shared/route';

/** The OpenAPI 3.1 document of the given routes, from the schemas that validate them. */
export function openApiDocument(routes: readonly Route[], version: string) {
  const paths: Record<string, Record<string, unknown>> = {};
  for (const route of routes) {
    const path = `/api${route.path.replace(/:([A-Za-z]+)/g, '{$1}')}`;
    paths[path] = { ...paths[path], [route.method.toLowerCase()]: operation(route) };
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Halfsilver',
      version,
      description: 'The interface between the browser and the server. Errors are problem details of RFC 9457.',
    },
    paths,
    components: {
      schemas: { ProblemDetails: jsonSchema(problemDetails, 'output') },
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'halfsilver' } },
    },
  };
}

function operation(route: Route) {
  const failure = {
    description: 'What went wrong',
    content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/ProblemDetails' } } },
  };
  const ok =
    route.status === 204
      ? { description: 'Done' }
      : { description: 'Done', content: { 'application/json': { schema: jsonSchema(route.response, 'output') } } };
  return {
    summary: route.summary,
    operationId: operationId(route),
    tags: [route.path.split('/')[1] ?? ''],
    ...(route.open ? {} : { security: [{ session: [] }] }),
    parameters: parametersOf(route),
    ...(hasProperties(route.body)
      ? {
          requestBody: { required: true, content: { 'application/json': { schema: jsonSchema(route.body, 'input') } } },
        }
      : {}),
    responses: { [String(route.status)]: ok, default: failure },
  };
}

function parametersOf(route: Route): unknown[] {
  const headers = [
    ...(route.versioned ? [['If-Match', 'The version that the request changes']] : []),
    ...(route.idempotent ? [['Idempotency-Key', 'New for every act; the same key twice is the same result']] : []),
  ].map(([name, description]) => ({ name, in: 'header', required: true, description, schema: { type: 'string' } }));
  return [...fieldsOf(route.params, 'path'), ...fieldsOf(route.query, 'query'), ...headers];
}

function fieldsOf(schema: z.ZodType, place: 'path' | 'query') {
  const described = jsonSchema(schema, 'input') as { properties?: Record<string, unknown>; required?: string[] };
  return Object.entries(described.properties ?? {}).map(([name, field]) => ({
    name,
    in: place,
    required: place === 'path' || (described.required ?? []).includes(name),
    schema: field,
  }));
}

function hasProperties(schema: z.ZodType): boolean {
  const described = jsonSchema(schema, 'input') as { properties?: object; type?: string };
  return described.type !== 'object' || Object.keys(described.properties ?? {}).length > 0;
}

function operationId(route: Route): string {
  const words = route.path
    .split('/')
    .filter(Boolean)
    .map((word) => word.replace(/[^A-Za-z]/g, ''));
  return route.method.toLowerCase() + words.map((word) => word.charAt(0).toUpperCase() + word.slice(1)).join('');
}

function jsonSchema(schema: z.ZodType, io: 'input' | 'output'): object {
  const { $schema: _, ...described } = z.toJSONSchema(schema, { io, unrepresentable: 'any' });
  return described;
}
