import type { INestApplication } from '@nestjs/common';
import { DocumentBuilder, SwaggerModule, type OpenAPIObject } from '@nestjs/swagger';
import { VERSION } from '../platform/version';

/** The API document, made from the routes and the contract they declare. */
export function apiDocument(app: INestApplication): OpenAPIObject {
  const head = new DocumentBuilder()
    .setTitle('Strainwright')
    .setDescription('Errors are problem details (RFC 9457) with a stable `code`; input errors name the fields in `errors`. Sign in with POST /api/session and send the access token as a bearer token.')
    .setVersion(VERSION)
    .addBearerAuth()
    .addSecurityRequirements('bearer')
    .build();
  return SwaggerModule.createDocument(app, head);
}
