import { toErrorRecord, DomainError } from '@cresthold/shared';
import type { NextFunction, Request, Response } from 'express';
import { certificateTypes } from '../calibrations/certificates.service.js';
import { sendProblem } from '../problem-details/problem-details.filter.js';

/** JSON, and the files that calibrations take: none of them can a plain HTML form send. */
const bodyTypes = ['application/json', ...certificateTypes];
const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses changes that a page of another origin asks for, beside the cookie's SameSite=Strict, and bodies
 * of types that a plain HTML form can send. Scripts send no Origin and are let through:
 * they hold no cookie that somebody else could ride on.
 */
export function sameOrigin(request: Request, response: Response, next: NextFunction): void {
  if (safeMethods.has(request.method)) return next();
  if (!isFromHere(request.headers)) {
    return sendProblem(response, toErrorRecord(new DomainError('request.cross-origin')));
  }
  if (hasBody(request) && request.is(bodyTypes) === false && !isEmergencyStop(request)) {
    return sendProblem(response, toErrorRecord(new DomainError('request.media-type')));
  }
  next();
}

interface OriginHeaders {
  origin?: string;
  host?: string;
  'sec-fetch-site'?: string | string[];
}

/** True where the request comes from a page of this server or from no page at all. */
export function isFromHere(headers: OriginHeaders): boolean {
  const site = headers['sec-fetch-site'];
  if (headers.origin === undefined) return site === undefined || site === 'same-origin' || site === 'none';
  return URL.canParse(headers.origin) && new URL(headers.origin).host === headers.host;
}

/** An emergency stop is never refused for its body; what is no JSON is then not read. */
function isEmergencyStop(request: Request): boolean {
  return request.path.endsWith('/emergency-stop');
}

function hasBody(request: Request): boolean {
  return request.headers['transfer-encoding'] !== undefined || Number(request.headers['content-length']) > 0;
}
