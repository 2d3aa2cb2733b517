import type { Response } from 'express';

/** @param path below the API's prefix, e.g. `users/technician` */
export function setLocation(response: Response, path: string): void {
  response.setHeader('Location', `/api/v1/${path.split('/').map(encodeURIComponent).join('/')}`);
}
