import type { NestExpressApplication } from '@nestjs/platform-express';
import { certificateBytesMax, certificateTypes } from '../calibrations/certificates.service.js';
import type { Config } from '../config/config.schema.js';
import { apiPrefix } from './api-prefix.js';
import { serveOpenApi } from './open-api.js';
import { refuseElsewhere, serveConsole } from './serve-console.js';
import { sameOrigin } from './same-origin.js';
import { securityHeaders } from './security-headers.js';

/** A rig of 200 channels or a graph of 300 steps fits many times. */
const bodyLimit = '4mb';

/** Gives a created application its edge: headers, prefix, body parser, document; for server and tests alike. */
export function setUpHttp(app: NestExpressApplication, config: Config): void {
  app.set('trust proxy', config.proxies);
  app.set('query parser', 'simple');
  app.disable('x-powered-by');
  app.set('etag', false);
  app.use(securityHeaders(config.isHttps));
  app.use(sameOrigin);
  app.useBodyParser('json', { limit: bodyLimit });
  app.useBodyParser('raw', { type: [...certificateTypes], limit: certificateBytesMax });
  app.setGlobalPrefix(apiPrefix);
  serveConsole(app, config.consoleFolder);
  serveOpenApi(app);
  app.use(refuseElsewhere(apiPrefix));
}
