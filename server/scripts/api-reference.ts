import { z } from 'zod';
import type { Endpoint } from '../../shared/schemas/endpoints.js';

/** The part of JSON Schema that zod writes and this reference reads. */
interface JsonSchema {
  readonly $ref?: string;
  readonly type?: string | readonly string[];
  readonly format?: string;
  readonly pattern?: string;
  readonly const?: unknown;
  readonly enum?: readonly unknown[];
  readonly anyOf?: readonly JsonSchema[];
  readonly oneOf?: readonly JsonSchema[];
  readonly items?: JsonSchema;
  readonly prefixItems?: readonly JsonSchema[];
  readonly properties?: Readonly<Record<string, JsonSchema>>;
  readonly required?: readonly string[];
  readonly additionalProperties?: boolean | JsonSchema;
  readonly default?: unknown;
  readonly minimum?: number;
  readonly maximum?: number;
  readonly exclusiveMinimum?: number;
  readonly exclusiveMaximum?: number;
  readonly minLength?: number;
  readonly maxLength?: number;
  readonly minItems?: number;
  readonly maxItems?: number;
}

export interface ApiReferenceInput {
  readonly endpoints: Readonly<Record<string, Endpoint>>;
  /** Named schemas; an endpoint refers to its schemas by these names. */
  readonly schemas: Readonly<Record<string, z.ZodType>>;
}

/**
 * Writes the API reference as Markdown: a table of all endpoints, then every schema they use, in a notation close to
 * TypeScript with limits and defaults as comments.
 */
export function renderApiReference({ endpoints, schemas }: ApiReferenceInput): string {
  const nameOf = new Map(Object.entries(schemas).map(([name, schema]) => [schema, name] as const));
  const used = new Set<string>();
  const link = (schema: z.ZodType | undefined): string => {
    if (schema === undefined) return '–';
    const name = nameOf.get(schema);
    if (name === undefined) throw new Error('An endpoint uses a schema that its module does not export.');
    used.add(name);
    return `[${name}](#${name.toLowerCase()})`;
  };
  const rows = Object.entries(endpoints).map(
    ([name, { method, path, summary, query, body, response }]) =>
      `| ${name} | ${method} | \`${path}\` | ${summary} | ${link(query)} | ${link(body)} | ${link(response)} |`,
  );
  const requests = new Set(
    Object.values(endpoints)
      .flatMap(({ query, body }) => [query, body])
      .filter((schema) => schema !== undefined),
  );
  const definitions = new Map<string, string>();
  const define = (names: readonly string[], generated: Readonly<Record<string, JsonSchema>>) => {
    const pending = [...names];
    for (let name = pending.pop(); name !== undefined; name = pending.pop()) {
      const json = generated[name];
      if (json === undefined) throw new Error(`No schema is called ${name}.`);
      if (!definitions.has(name))
        definitions.set(
          name,
          typeText(json, '', (reference) => pending.push(reference)),
        );
    }
  };
  // What both sides use is shown as a caller may send it: with the fields that have defaults optional.
  const isRequest = (name: string) => requests.has(schemas[name] as z.ZodType);
  define([...used].filter(isRequest), jsonSchemas(schemas, 'input'));
  define(
    [...used].filter((name) => !isRequest(name)),
    jsonSchemas(schemas, 'output'),
  );
  return [
    '# API reference',
    '',
    'Written by `npm run api-docs` from `shared/schemas/endpoints.ts`; do not edit. Paths are below `/api/v1`. Requests and responses are JSON.',
    'A failed request answers with `{ "error": { "code", "message", "issues"?, "requestId"?, "figures"? } }`; `issues` names every field that is wrong (422).',
    '',
    '| name | method | path | what it does | query | body | response |',
    '| --- | --- | --- | --- | --- | --- | --- |',
    ...rows,
    '',
    '## Schemas',
    '',
    '`?` marks what may be left out; a comment gives limits, format or default.',
    '',
    ...[...definitions].sort(([a], [b]) => a.localeCompare(b)).flatMap(([name, text]) => [`### ${name}`, '', '```ts', text, '```', '']),
  ].join('\n');
}

function jsonSchemas(schemas: ApiReferenceInput['schemas'], io: 'input' | 'output'): Readonly<Record<string, JsonSchema>> {
  const registry = z.registry<{ id: string }>();
  for (const [name, schema] of Object.entries(schemas)) registry.add(schema, { id: name });
  const generated = z.toJSONSchema(registry, { io, unrepresentable: 'any', uri: (name) => `#${name}` });
  return generated.schemas as Readonly<Record<string, JsonSchema>>;
}

function typeText(schema: JsonSchema, indent: string, onReference: (name: string) => void): string {
  const inner = (part: JsonSchema) => typeText(part, indent, onReference);
  if (schema.$ref !== undefined) {
    const name = schema.$ref.replace(/^.*#/, '');
    onReference(name);
    return name;
  }
  if (schema.const !== undefined) return JSON.stringify(schema.const);
  if (schema.enum !== undefined) return schema.enum.map((value) => JSON.stringify(value)).join(' | ');
  const choices = schema.anyOf ?? schema.oneOf;
  if (choices !== undefined) return choices.map(inner).join(' | ');
  if (schema.prefixItems !== undefined) return `[${schema.prefixItems.map(inner).join(', ')}]`;
  if (schema.type === 'array') return `Array<${inner(schema.items ?? {})}>`;
  if (schema.type === 'object') return objectText(schema, indent, onReference);
  const types = typeof schema.type === 'string' ? [schema.type] : (schema.type ?? ['unknown']);
  return types.map((type) => (type === 'integer' ? 'number' : type)).join(' | ');
}

function objectText(schema: JsonSchema, indent: string, onReference: (name: string) => void): string {
  const { properties, additionalProperties, required = [] } = schema;
  if (properties === undefined) {
    const value = typeof additionalProperties === 'object' ? typeText(additionalProperties, indent, onReference) : 'unknown';
    return `Record<string, ${value}>`;
  }
  const deeper = `${indent}  `;
  const lines = Object.entries(properties).map(([name, property]) => {
    const remark = remarkOn(property);
    return `${deeper}${name}${required.includes(name) ? '' : '?'}: ${typeText(property, deeper, onReference)};${remark === '' ? '' : ` // ${remark}`}`;
  });
  return lines.length === 0 ? '{}' : `{\n${lines.join('\n')}\n${indent}}`;
}

/** Limits, format and default of a property, as far as they say something. */
function remarkOn(schema: JsonSchema): string {
  const subject = schema.anyOf?.find((choice) => choice.type !== 'null') ?? schema;
  const isPlainInteger = subject.type === 'integer';
  const lower = isPlainInteger && subject.minimum === Number.MIN_SAFE_INTEGER ? undefined : subject.minimum;
  const upper = isPlainInteger && subject.maximum === Number.MAX_SAFE_INTEGER ? undefined : subject.maximum;
  return [
    isPlainInteger ? 'whole number' : '',
    subject.format ?? '',
    rangeText('', lower, upper),
    subject.exclusiveMinimum === undefined ? '' : `above ${subject.exclusiveMinimum}`,
    subject.exclusiveMaximum === undefined || subject.exclusiveMaximum === Number.MAX_SAFE_INTEGER
      ? ''
      : `below ${subject.exclusiveMaximum}`,
    rangeText(' characters', subject.minLength, subject.maxLength),
    rangeText(' items', subject.minItems, subject.maxItems),
    schema.default === undefined ? '' : `default ${JSON.stringify(schema.default)}`,
  ]
    .filter((text) => text !== '')
    .join(', ');
}

function rangeText(what: string, from: number | undefined, to: number | undefined): string {
  if (from !== undefined && to !== undefined) return from === to ? `${from}${what}` : `${from} to ${to}${what}`;
  if (from !== undefined) return `at least ${from}${what}`;
  return to === undefined ? '' : `at most ${to}${what}`;
}
