import { Body, Param, PipeTransform, Query } from '@nestjs/common';
import { ApiBody, ApiParam, ApiQuery, ApiResponse } from '@nestjs/swagger';
import { id } from '@strainwright/common/contract/wire';
import { z } from 'zod';
import { FieldError, invalidFields, notFound, Problem } from '../problem';
import { openApiSchema } from './open-api';

/** Parses with a schema of the contract: unknown fields are refused, each fault is told at its path. */
class ContractPipe implements PipeTransform {
  constructor(private readonly schema: z.ZodType, private readonly where: 'body' | 'query') {}

  transform(value: unknown): unknown {
    return parseContract(this.schema, value, this.where);
  }
}

class IdPipe implements PipeTransform {
  constructor(private readonly noun: string) {}

  transform(value: unknown): string {
    const parsed = id.safeParse(value);
    if (!parsed.success) throw notFound(this.noun);
    return parsed.data;
  }
}

/**
 * Parses input by a schema of the contract.
 * @throws Problem 422 with the path of every field at fault, 400 when there is no object at all or a query is wrong
 */
export function parseContract<T>(schema: z.ZodType<T>, value: unknown, where: 'body' | 'query' = 'body'): T {
  if (where === 'body' && (value === undefined || value === null)) {
    // An action whose fields may all be left out needs no body.
    const without = schema.safeParse({});
    if (without.success) return without.data;
    throw new Problem(400, 'body.missing', 'The request needs a JSON body.');
  }
  const unreadable = unreadableText(value, '');
  if (unreadable !== undefined) throw invalidFields([unreadable]);
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const errors = parsed.error.issues.flatMap(fieldErrors);
  if (where === 'query') throw new Problem(400, 'query.invalid', errors.map((e) => `${e.path}: ${e.message}`).join('; '), errors);
  throw invalidFields(errors);
}

function fieldErrors(issue: z.core.$ZodIssue): FieldError[] {
  const path = issue.path.map(String);
  if (issue.code === 'unrecognized_keys') return issue.keys.map((key) => ({ path: [...path, key].join('.'), message: 'There is no such field' }));
  return [{ path: path.join('.'), message: issue.message }];
}

/** NUL and lone surrogates cannot be stored: told here at their field, instead of failing in the database. */
function unreadableText(value: unknown, path: string): FieldError | undefined {
  if (typeof value === 'string') return value.includes('\0') || /\p{Surrogate}/u.test(value) ? { path, message: 'Holds characters that cannot be stored' } : undefined;
  if (typeof value !== 'object' || value === null) return undefined;
  for (const [key, inner] of Object.entries(value)) {
    const fault = unreadableText(inner, path === '' ? key : `${path}.${key}`);
    if (fault !== undefined) return fault;
  }
  return undefined;
}

/** The body, parsed by the contract, and told in the API document. */
export function FromBody(schema: z.ZodType): ParameterDecorator {
  return (target, key, index) => {
    Body(new ContractPipe(schema, 'body'))(target, key, index);
    describe(target, key, ApiBody({ schema: openApiSchema(schema, 'input') }));
  };
}

/** The query string, parsed by the contract, and told in the API document. */
export function FromQuery(schema: z.ZodObject): ParameterDecorator {
  return (target, key, index) => {
    Query(new ContractPipe(schema, 'query'))(target, key, index);
    for (const [name, field] of Object.entries(schema.shape)) {
      const fieldSchema = field as z.ZodType;
      describe(target, key, ApiQuery({ name, required: !fieldSchema.safeParse(undefined).success, schema: openApiSchema(fieldSchema, 'input') }));
    }
  };
}

/** An id in the path; anything else than a UUID is answered with 404, as nothing can be there. */
export function FromId(noun: string, name = 'id'): ParameterDecorator {
  return (target, key, index) => {
    Param(name, new IdPipe(noun))(target, key, index);
    describe(target, key, ApiParam({ name, schema: { type: 'string', format: 'uuid' } }));
  };
}

/** Tells the API document what a route answers. */
export function Answers(schema: z.ZodType, status = 200): MethodDecorator {
  return ApiResponse({ status, schema: openApiSchema(schema, 'output') });
}

function describe(target: object, key: string | symbol | undefined, decorator: MethodDecorator): void {
  if (key === undefined) return;
  const descriptor = Object.getOwnPropertyDescriptor(target, key);
  if (descriptor !== undefined) decorator(target, key, descriptor);
}
