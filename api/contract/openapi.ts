import { OpenAPIRegistry, OpenApiGeneratorV31, type RouteConfig } from '@asteasolutions/zod-to-openapi';
import { z, type ZodObject } from 'zod';
import { problem } from './common';
import { fileProblemReply } from './files';
import type { RouteSpec } from './route';

const HTTP_PROBLEM = 'application/problem+json';

function requestOf(spec: RouteSpec): NonNullable<RouteConfig['request']> {
  const file = spec.form === 'file';
  const fields = spec.body as ZodObject | undefined;
  const upload = z.object({ file: z.string().meta({ format: 'binary' }), ...(file && fields ? fields.shape : {}) });
  return {
    ...(spec.params ? { params: spec.params as ZodObject } : {}),
    ...(spec.query ? { query: spec.query as ZodObject } : {}),
    ...(spec.edits === 'if-match' ? { headers: z.object({ 'If-Match': z.string() }) } : {}),
    ...(file ? { body: { content: { 'multipart/form-data': { schema: upload } } } } : {}),
    ...(!file && spec.body ? { body: { content: { 'application/json': { schema: spec.body } }, required: true } } : {}),
  };
}

function successOf(spec: RouteSpec): RouteConfig['responses'][string] {
  if (spec.form === 'stream') return { description: 'The stream', content: { 'text/event-stream': { schema: z.string() } } };
  if (spec.form === 'bytes') return { description: 'The bytes', content: { 'application/octet-stream': { schema: z.string() } } };
  if (spec.reply === undefined) return { description: 'Done' };
  return { description: 'Done', content: { 'application/json': { schema: spec.reply } } };
}

/** The OpenAPI 3.1 document, made from the very specifications that the routes are bound by. */
export function openApiDocument(routes: Readonly<Record<string, RouteSpec>>, serverUrl: string): object {
  const registry = new OpenAPIRegistry();
  const bearer = registry.registerComponent('securitySchemes', 'bearer', { type: 'http', scheme: 'bearer', bearerFormat: 'JWT' });
  const cookie = registry.registerComponent('securitySchemes', 'cookie', { type: 'apiKey', in: 'cookie', name: '__Host-leanyear-access' });
  const problems = (description: string, schema: z.ZodType = problem) => ({ description, content: { [HTTP_PROBLEM]: { schema } } });
  for (const [operationId, spec] of Object.entries(routes)) {
    const open = spec.access === 'public' || spec.access === 'link';
    registry.registerPath({
      operationId,
      method: spec.method,
      path: spec.path.replaceAll(/:(\w+)/g, '{$1}'),
      tags: [spec.tag],
      summary: spec.summary,
      'x-permission': spec.access,
      security: open ? [] : [{ [bearer.name]: [] }, { [cookie.name]: [] }],
      request: requestOf(spec),
      responses: {
        [String(spec.status ?? (spec.reply || spec.form ? 200 : 204))]: successOf(spec),
        ...(open ? {} : { 401: problems('Not signed in'), 403: problems('Not allowed') }),
        ...(spec.params ? { 404: problems('Not found') } : {}),
        ...(spec.edits === 'if-match' ? { 412: problems('Changed meanwhile'), 428: problems('If-Match is missing') } : {}),
        ...(spec.method === 'get' ? {} : { 409: problems('Refused, with every reason') }),
        ...(spec.body || spec.query || spec.form === 'file'
          ? { 422: problems('Something is not right, said at its place', spec.form === 'file' ? z.union([problem, fileProblemReply]) : problem) }
          : {}),
        default: problems('Any other trouble'),
      },
    });
  }
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Leanyear',
      version: '1',
      description: 'The desk on which a reinsurer’s treaty team prices and sells catastrophe cover. Prices support decisions and are not an actuarial opinion; local regulation, licence and sanctions rules come first.',
    },
    servers: [{ url: serverUrl }],
  });
}
