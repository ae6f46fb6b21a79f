import { z } from 'zod';
import type { Route } from './route';

/** OpenAPI 3.1 from the route table: the same schemas that check the requests. */
export function openApi(routes: readonly Route[]): object {
  const paths: Record<string, Record<string, object>> = {};
  for (const route of routes) {
    const path = `/api${route.path.replace(/:(\w+)/g, '{$1}')}`;
    paths[path] ??= {};
    paths[path][route.method] = {
      summary: route.summary,
      description: `Needs: ${route.needs}`,
      parameters: [...parameters(route.params, 'path'), ...parameters(route.query, 'query')],
      ...(route.body ? { requestBody: { required: true, content: json(route.body, 'input') } } : {}),
      responses: {
        [route.response === null && route.status === 200 ? 204 : route.status]: {
          description: 'Done',
          ...(route.response ? { content: json(route.response, 'output') } : {}),
        },
        default: { description: 'Problem details, RFC 9457' },
      },
    };
  }
  return { openapi: '3.1.0', info: { title: 'Elbowroom', version: '1' }, paths };
}

function schema(type: z.ZodType, io: 'input' | 'output'): object {
  return z.toJSONSchema(type, { io, unrepresentable: 'any', reused: 'inline' });
}

function json(type: z.ZodType, io: 'input' | 'output'): object {
  return { 'application/json': { schema: schema(type, io) } };
}

function parameters(type: z.ZodType, place: 'path' | 'query'): object[] {
  const { properties = {}, required = [] } = schema(type, 'input') as {
    properties?: Record<string, object>;
    required?: string[];
  };
  return Object.entries(properties).map(([name, of]) => ({
    name,
    in: place,
    required: place === 'path' || required.includes(name),
    schema: of,
  }));
}
