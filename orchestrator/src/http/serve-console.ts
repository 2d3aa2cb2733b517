import { existsSync } from 'node:fs';
import { join, sep } from 'node:path';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { DomainError, toErrorRecord } from '@cresthold/shared';
import type { NextFunction, Request, Response } from 'express';
import { sendProblem } from '../problem-details/problem-details.filter.js';

/**
 * Serves the built console; every address that is no file, no asset and no API is answered by its page, so
 * that people can keep links to what they see.
 */
export function serveConsole(app: NestExpressApplication, consoleFolder: string): void {
  const page = join(consoleFolder, 'index.html');
  // Without a built console the API still works; a page that is asked for is then not found.
  if (!existsSync(page)) return;
  app.useStaticAssets(consoleFolder, { setHeaders: setCaching });
  app.use((request: Request, response: Response, next: NextFunction) => {
    if (!isPage(request)) return next();
    response.set('Cache-Control', 'no-cache');
    response.sendFile(page);
  });
}

/** Answers what is outside of the API's prefix with problem details too. */
export function refuseElsewhere(apiPrefix: string) {
  return (request: Request, response: Response, next: NextFunction): void => {
    if (request.path.startsWith(`/${apiPrefix}/`)) return next();
    sendProblem(response, toErrorRecord(new DomainError('request.not-found')));
  };
}

function isPage({ method, path }: Request): boolean {
  return (method === 'GET' || method === 'HEAD') && !/^\/(api|assets)(\/|$)/.test(path);
}

/** Built assets carry a digest in their names and never change; everything else is asked for anew. */
function setCaching(response: Response, path: string): void {
  const isAsset = path.includes(`${sep}assets${sep}`);
  response.setHeader('Cache-Control', isAsset ? 'public, max-age=31536000, immutable' : 'no-cache');
}
