import type { ApiResponseSchemaHost } from '@nestjs/swagger';
import { z } from 'zod';

type SchemaObject = ApiResponseSchemaHost['schema'];

/** JSON Schema of a contract schema, in the dialect of OpenAPI 3.0. */
export function openApiSchema(schema: z.ZodType, io: 'input' | 'output'): SchemaObject {
  const { $schema: _dialect, ...described } = z.toJSONSchema(schema, { io, target: 'openapi-3.0', unrepresentable: 'any' });
  return JSON.parse(JSON.stringify(described)) as SchemaObject;
}
