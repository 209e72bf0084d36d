import type { z } from 'zod';
import { formatIssuePath, type InputIssue } from '../../shared/schemas/problem.js';
import { InvalidInputError } from '../errors.js';

const TYPE_NAMES: Readonly<Record<string, string>> = {
  string: 'a text',
  number: 'a number',
  int: 'a whole number',
  boolean: 'true or false',
  array: 'a list',
  object: 'an object',
  record: 'an object',
};

const countedUnit = (origin: string): string => (origin === 'string' ? ' characters' : origin === 'array' ? ' entries' : '');

/** Says what a field should be where the schema itself gives no message of its own. */
function plainMessage(issue: z.core.$ZodRawIssue): string | undefined {
  switch (issue.code) {
    case 'invalid_type':
      return `expected ${TYPE_NAMES[issue.expected] ?? issue.expected}`;
    case 'invalid_value':
      return `expected ${issue.values.length === 1 ? '' : 'one of: '}${issue.values.map(String).join(', ')}`;
    case 'invalid_format':
      return issue.format === 'uuid' ? 'expected an id' : issue.format === 'email' ? 'expected an e-mail address' : undefined;
    case 'too_small':
      return `expected at least ${issue.minimum}${countedUnit(issue.origin)}`;
    case 'too_big':
      return `expected at most ${issue.maximum}${countedUnit(issue.origin)}`;
    default:
      return undefined;
  }
}

/** A failed union only says so; what its branches would have taken is more help. */
function unionMessage(issue: z.core.$ZodIssueInvalidUnion): string {
  const values = issue.errors.flatMap((branch) =>
    branch.flatMap((inner) => (inner.code === 'invalid_value' ? inner.values.map(String) : [])),
  );
  return values.length > 0 ? `expected one of: ${values.join(', ')}` : (issue.errors[0]?.[0]?.message ?? issue.message);
}

function toInputIssues(issue: z.core.$ZodIssue): InputIssue[] {
  if (issue.code === 'unrecognized_keys') {
    return issue.keys.map((key) => ({ path: formatIssuePath([...issue.path, key]), message: 'is not a known field' }));
  }
  return [{ path: formatIssuePath(issue.path), message: issue.code === 'invalid_union' ? unionMessage(issue) : issue.message }];
}

export type ParseResult<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly issues: readonly InputIssue[] };

/** Parses something from outside and reports every issue with path and cure. */
export function tryParse<S extends z.ZodType>(schema: S, input: unknown): ParseResult<z.output<S>> {
  const result = schema.safeParse(input, { error: plainMessage });
  return result.success ? { ok: true, value: result.data } : { ok: false, issues: result.error.issues.flatMap(toInputIssues) };
}

/** The parts of a request that an endpoint may describe. Issues of all parts are reported together. */
export function parseRequest(
  schemas: { readonly params?: z.ZodType; readonly query?: z.ZodType; readonly body?: z.ZodType },
  request: { readonly params: unknown; readonly query: unknown; readonly body: unknown },
): { params: unknown; query: unknown; body: unknown } {
  const parsed: Record<'params' | 'query' | 'body', unknown> = { params: undefined, query: undefined, body: undefined };
  const issues: InputIssue[] = [];
  for (const part of ['params', 'query', 'body'] as const) {
    const schema = schemas[part];
    if (schema === undefined) continue;
    // Without a body there is none to parse; an empty object makes the schema name each missing field.
    const result = tryParse(schema, request[part] ?? {});
    if (result.ok) parsed[part] = result.value;
    else issues.push(...result.issues);
  }
  if (issues.length > 0) throw new InvalidInputError(issues);
  return parsed;
}
