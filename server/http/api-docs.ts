import { z } from 'zod';
import { contracts } from '@shared/contracts';
import type { AnyEndpoint } from '@shared/http/endpoint';
import { problemSchema } from '@shared/http/problem';

type Json = Record<string, unknown>;
type Schema = { properties?: Record<string, Json>; required?: string[] } & Json;

const jsonSchema = (schema: z.ZodType, io: 'input' | 'output'): Schema => {
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: 'any' }) as Schema;
  return rest as Schema;
};

function parameters(endpoint: AnyEndpoint): Json[] {
  const params = endpoint.params ? jsonSchema(endpoint.params, 'input') : { properties: {} };
  const query = endpoint.query ? jsonSchema(endpoint.query, 'input') : { properties: {} };
  const list: Json[] = Object.entries(params.properties ?? {}).map(([name, schema]) => ({
    name,
    in: 'path',
    required: true,
    schema,
  }));
  for (const [name, schema] of Object.entries(query.properties ?? {})) {
    list.push({ name, in: 'query', required: query.required?.includes(name) ?? false, schema });
  }
  if (endpoint.versioned)
    list.push({ name: 'If-Match', in: 'header', required: true, schema: { type: 'string' } });
  return list;
}

function requestBody(endpoint: AnyEndpoint): Json | undefined {
  if (endpoint.upload) {
    const fields = endpoint.body ? (jsonSchema(endpoint.body, 'input').properties ?? {}) : {};
    const schema = {
      type: 'object',
      properties: { ...fields, [endpoint.upload.field]: { type: 'string', format: 'binary' } },
    };
    return { content: { 'multipart/form-data': { schema } } };
  }
  if (!endpoint.body) return undefined;
  return { required: true, content: { 'application/json': { schema: jsonSchema(endpoint.body, 'input') } } };
}

function responses(endpoint: AnyEndpoint): Json {
  const problem = {
    description: 'Problem (RFC 9457)',
    content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
  };
  if (endpoint.response === 'empty') return { '204': { description: 'Done' }, default: problem };
  const content =
    endpoint.response === 'file'
      ? { 'application/octet-stream': { schema: { type: 'string', format: 'binary' } } }
      : { 'application/json': { schema: jsonSchema(endpoint.response, 'output') } };
  return { '200': { description: 'Done', content }, default: problem };
}

let made: Json | undefined;

/** The OpenAPI 3.1 description, made from the contracts. */
export function openApi(): Json {
  if (made) return made;
  const paths: Record<string, Json> = {};
  for (const endpoint of contracts) {
    const path = endpoint.path.replace(/:([A-Za-z]+)/g, '{$1}');
    (paths[path] ??= {})[endpoint.method.toLowerCase()] = {
      operationId: endpoint.id,
      summary: endpoint.summary,
      tags: [endpoint.id.split('.')[0]],
      parameters: parameters(endpoint),
      requestBody: requestBody(endpoint),
      responses: responses(endpoint),
    };
  }
  made = {
    openapi: '3.1.0',
    info: {
      title: 'Analemma',
      version: '0.1.0',
      description: 'Changes need the header X-CSRF-Token from GET /api/session.',
    },
    paths,
    components: { schemas: { Problem: jsonSchema(problemSchema, 'output') } },
  };
  return made;
}

const escapeHtml = (text: string): string =>
  text.replace(/[&<>"]/g, (c) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;' })[c] as string);

/** A page that people can read: every operation with what goes in and what comes out. */
export function apiDocsPage(): string {
  const groups = new Map<string, AnyEndpoint[]>();
  for (const endpoint of contracts) {
    const feature = endpoint.id.split('.')[0] as string;
    groups.set(feature, [...(groups.get(feature) ?? []), endpoint]);
  }
  const sections = [...groups].map(
    ([feature, endpoints]) => `<h2 id="${feature}">${feature}</h2>${endpoints.map(operation).join('')}`,
  );
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width,initial-scale=1"><title>Analemma: HTTP API</title>
<style>body{font:15px/1.5 system-ui,sans-serif;max-width:60rem;margin:2rem auto;padding:0 1rem;color:#13201b;background:#fcfdfb}h1,h2{font-family:Georgia,serif;font-weight:500}h2{border-top:2px solid;padding-top:.5rem;margin-top:2.5rem}summary{cursor:pointer;padding:.35rem 0;border-bottom:1px solid #cfd6ce}code,pre{font:13px/1.5 ui-monospace,monospace}pre{overflow:auto;background:#e9ede7;padding:.75rem}b{display:inline-block;min-width:4rem}a{color:#0e4f5e}</style></head>
<body><h1>Analemma: HTTP API</h1><p>Made from the contracts; the same as a file: <a href="/api/openapi.json">openapi.json</a> (OpenAPI 3.1). Errors are problem documents (RFC 9457).
Changes need a session cookie, the header <code>X-CSRF-Token</code> from <code>GET /api/session</code>, and <code>If-Match</code> where a version is named.</p>
<p>${[...groups.keys()].map((name) => `<a href="#${name}">${name}</a>`).join(' · ')}</p>${sections.join('')}</body></html>`;
}

function operation(endpoint: AnyEndpoint): string {
  const part = (title: string, schema: unknown): string =>
    schema ? `<p>${title}</p><pre>${escapeHtml(JSON.stringify(schema, null, 2))}</pre>` : '';
  const body = requestBody(endpoint);
  const response =
    endpoint.response === 'file' || endpoint.response === 'empty'
      ? endpoint.response
      : jsonSchema(endpoint.response, 'output');
  return `<details><summary><b>${endpoint.method}</b> <code>${escapeHtml(endpoint.path)}</code> ${escapeHtml(endpoint.summary)}</summary>
${part('Parameters', parameters(endpoint).length ? parameters(endpoint) : undefined)}${part('Body', body)}${part('Answer', response)}</details>`;
}
