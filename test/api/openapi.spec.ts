import request from 'supertest';
import { ROUTES } from '../../api/contract/routes';
import { openTestApi, type TestApi } from '../support/api';

interface Operation {
  operationId: string;
  summary: string;
  tags: string[];
  security: object[];
  'x-permission': string;
  parameters?: { name: string; in: string; required?: boolean; schema: object }[];
  requestBody?: { content: Record<string, { schema: object }> };
  responses: Record<string, { description: string; content?: Record<string, { schema: object }> }>;
}
interface Document {
  openapi: string;
  paths: Record<string, Record<string, Operation>>;
  components: { securitySchemes: Record<string, object>; schemas?: Record<string, object> };
  servers: { url: string }[];
}

/** Words that a JSON Schema of 2020-12 may use here; another would mean that a zod type was not understood. */
const SCHEMA_WORDS = new Set([
  'type', 'properties', 'required', 'items', 'enum', 'const', 'format', 'pattern', 'minimum', 'maximum', 'exclusiveMinimum', 'exclusiveMaximum',
  'minLength', 'maxLength', 'minItems', 'maxItems', 'additionalProperties', 'anyOf', 'oneOf', 'allOf', 'default', 'description', '$ref',
  'prefixItems', 'propertyNames', 'discriminator', 'not',
]);

function check(schema: object, where: string): void {
  for (const [word, value] of Object.entries(schema)) {
    if (!SCHEMA_WORDS.has(word)) throw new Error(`${where}: unknown word ${word}`);
    if (word === 'properties') for (const [name, inner] of Object.entries(value as Record<string, object>)) check(inner, `${where}.${name}`);
    else if (word === 'items') check(value as object, `${where}[]`);
    else if (word === 'anyOf' || word === 'oneOf' || word === 'allOf') (value as object[]).forEach((inner, index) => check(inner, `${where}/${word}/${index}`));
    else if (word === 'required' && !('properties' in schema)) throw new Error(`${where}: required without properties`);
  }
}

describe('the OpenAPI document', () => {
  let api: TestApi;
  let document: Document;
  let operations: [string, string, Operation][];
  beforeAll(async () => {
    api = await openTestApi();
    document = (await request(api.express).get('/api/v1/openapi.json').expect(200)).body as Document;
    operations = Object.entries(document.paths).flatMap(([path, methods]) =>
      Object.entries(methods).map(([method, operation]): [string, string, Operation] => [path, method, operation]),
    );
  });
  afterAll(() => api.close());

  it('is of version 3.1 and has every route of the contract once, and no other', () => {
    expect(document.openapi).toBe('3.1.0');
    const named = Object.entries(ROUTES).map(([name, spec]) => `${name}: ${spec.method} ${spec.path.replaceAll(/:(\w+)/g, '{$1}')}`);
    expect(operations.map(([path, method, { operationId }]) => `${operationId}: ${method} ${path}`).sort()).toEqual(named.sort());
  });

  it('says who may call each, and by which credentials', () => {
    const schemes = Object.keys(document.components.securitySchemes);
    for (const [, , operation] of operations) {
      const spec = ROUTES[operation.operationId];
      expect(operation['x-permission']).toBe(spec?.access);
      const open = spec?.access === 'public' || spec?.access === 'link';
      expect(operation.security).toEqual(open ? [] : schemes.map((scheme) => ({ [scheme]: [] })));
      expect(Object.keys(operation.responses).filter((status) => status === '401' || status === '403')).toHaveLength(open ? 0 : 2);
    }
  });

  it('declares each part of each path, and nothing as a part that is none', () => {
    for (const [path, method, { parameters = [] }] of operations) {
      const parts = [...path.matchAll(/\{(\w+)\}/g)].map((match) => match[1]).sort();
      const declared = parameters.filter((parameter) => parameter.in === 'path');
      expect({ path, method, parts: declared.map(({ name }) => name).sort() }).toEqual({ path, method, parts });
      expect(declared.every(({ required }) => required === true)).toBe(true);
    }
  });

  it('has a summary, a success and problem details for every operation, in schemas that are JSON Schema', () => {
    for (const [path, method, operation] of operations) {
      const where = `${method} ${path}`;
      expect(operation.summary.length).toBeGreaterThan(3);
      expect(operation.tags).toHaveLength(1);
      const statuses = Object.keys(operation.responses);
      expect(statuses.filter((status) => status.startsWith('2'))).toHaveLength(1);
      for (const [status, { content = {} }] of Object.entries(operation.responses)) {
        const [type] = Object.keys(content);
        if (!status.startsWith('2')) expect(type).toBe('application/problem+json');
        for (const { schema } of Object.values(content)) check(schema, `${where} ${status}`);
      }
      for (const { schema, name } of operation.parameters ?? []) check(schema, `${where} ${name}`);
      for (const { schema } of Object.values(operation.requestBody?.content ?? {})) check(schema, `${where} body`);
    }
  });

  it('asks for a file as a form, and for the version where edits must say it', () => {
    const upload = document.paths['/catalogues/{id}/versions']?.['post'];
    expect(upload?.requestBody?.content['multipart/form-data']?.schema).toMatchObject({ properties: { file: { type: 'string', format: 'binary' } }, required: ['file'] });
    const edit = document.paths['/people/{id}']?.['patch'];
    expect(edit?.parameters).toContainEqual(expect.objectContaining({ name: 'If-Match', in: 'header', required: true }));
    expect(Object.keys(edit?.responses ?? {})).toEqual(expect.arrayContaining(['412', '428']));
  });
});
