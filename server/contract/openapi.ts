/** The API's description for other programs, made from the contract: OpenAPI 3.1, https://spec.openapis.org/oas/v3.1.0 */
import { z } from 'zod';
import type { RouteDefinition, RouteTable } from './route.ts';
import { Problem } from './shared.ts';

const ACCESS_WORDS = {
  anyone: 'Anyone.',
  'signed-in': 'Anyone who is signed in.',
  helper: 'Members of the studio.',
  maker: 'Makers and owners of the studio.',
  owner: 'Owners of the studio.',
};

type Json = Record<string, unknown>;

export function openApi(table: RouteTable, version: string): Json {
  const paths: Record<string, Json> = {};
  for (const [key, route] of Object.entries(table) as [string, RouteDefinition][]) {
    const [method, path] = key.split(' ');
    const template = path.replace(/:(\w+)/g, '{$1}');
    (paths[template] ??= {})[method.toLowerCase()] = operation(key, route, path);
  }
  return {
    openapi: '3.1.0',
    info: { title: 'Inkmuster', version, description: 'Lengths in mm, angles in degrees clockwise, x to the right, y down.' },
    servers: [{ url: '/api' }],
    paths,
    components: {
      schemas: { Problem: schema(Problem, 'output') },
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'inkmuster' }, formToken: { type: 'apiKey', in: 'header', name: 'X-CSRF-Token' } },
    },
  };
}

function operation(key: string, route: RouteDefinition, path: string): Json {
  const changes = !key.startsWith('GET ');
  const status = route.status ?? (route.response || route.produces ? 200 : 204);
  const inPath = fields(route.params);
  const parameters = [...path.matchAll(/:(\w+)/g)].map(([, name]) => ({ name, in: 'path', required: true, schema: inPath.properties[name] ?? { type: 'string', format: 'uuid' } }));
  const inQuery = fields(route.query);
  const query = Object.entries(inQuery.properties).map(([name, field]) => ({ name, in: 'query', required: inQuery.required.includes(name), schema: field }));
  return {
    operationId: key.replace(/[^A-Za-z]+/g, '_'),
    summary: route.summary,
    description: `May be called by: ${ACCESS_WORDS[route.access]}`,
    ...(route.access === 'anyone' ? { security: [] } : { security: [changes ? { session: [], formToken: [] } : { session: [] }] }),
    parameters: [...parameters, ...query],
    ...(requestBody(route) ?? {}),
    responses: {
      [status]: { description: route.summary, ...(content(route) ?? {}) },
      default: { description: 'What went wrong, in words', content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } } },
    },
  };
}

function requestBody(route: RouteDefinition): Json | null {
  if (route.upload) {
    const text = fields(route.body);
    const file = { type: 'string', format: 'binary' };
    const files = (route.upload.maxFiles ?? 1) > 1 ? { type: 'array', items: file, maxItems: route.upload.maxFiles } : file;
    const form = { type: 'object', properties: { ...text.properties, [route.upload.field]: files }, required: [...text.required, route.upload.field] };
    return { requestBody: { required: true, content: { 'multipart/form-data': { schema: form } } } };
  }
  return route.body ? { requestBody: { required: true, content: { 'application/json': { schema: schema(route.body, 'input') } } } } : null;
}

function content(route: RouteDefinition): Json | null {
  if (route.response) return { content: { 'application/json': { schema: schema(route.response, 'output') } } };
  return route.produces ? { content: { [route.produces]: { schema: { type: 'string', ...(route.produces.startsWith('text/') ? {} : { format: 'binary' }) } } } } : null;
}

function fields(of: z.ZodType | undefined): { properties: Record<string, unknown>; required: string[] } {
  const described = of ? (schema(of, 'input') as { properties?: Record<string, unknown>; required?: string[] }) : {};
  return { properties: described.properties ?? {}, required: described.required ?? [] };
}

function schema(of: z.ZodType, io: 'input' | 'output'): Json {
  // What the engine's own types describe has no schema here and is left open.
  const { $schema: _, ...rest } = z.toJSONSchema(of, { io, unrepresentable: 'any' }) as Json;
  return rest;
}
