import type { INestApplication } from '@nestjs/common';
import { DocumentBuilder, SwaggerModule, type OpenAPIObject } from '@nestjs/swagger';
import { sessionCookieName } from '../auth/session-cookie.js';

/** The OpenAPI document of the server. */
export function openApiDocument(app: INestApplication): OpenAPIObject {
  const builder = new DocumentBuilder()
    .setTitle('Cresthold')
    .setDescription(
      'Finds, holds and proves the best operating point of a machine on a bench. ' +
        'The emergency stop of this interface is a software stop on a general-purpose computer and no safety ' +
        'function: the rig needs its own hard-wired emergency stop.',
    )
    .setVersion('1')
    .addCookieAuth(sessionCookieName);
  return SwaggerModule.createDocument(app, builder.build(), {
    operationIdFactory: (controller, method) =>
      `${controller.replace(/Controller$/, '').replace(/^./, (c) => c.toLowerCase())}_${method}`,
  });
}

/** Serves the document at /api/openapi.json and its pages at /api/docs. */
export function serveOpenApi(app: INestApplication): void {
  SwaggerModule.setup('api/docs', app, () => openApiDocument(app), {
    jsonDocumentUrl: 'api/openapi.json',
    raw: ['json'],
    customSiteTitle: 'Cresthold API',
  });
}
