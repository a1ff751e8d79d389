import type { IncomingMessage } from 'node:http';
import type { NextFunction, Request, Response } from 'express';
import { notAllowed } from './errors';

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Whether a request comes from our own pages, as far as the browser tells: `Origin` must be ours, and where it is
 * missing `Sec-Fetch-Site` must not speak of another site. Programs that are no browsers send neither.
 */
export function isSameOrigin(request: IncomingMessage, ownOrigin: string): boolean {
  const { origin, host } = request.headers;
  if (origin !== undefined) {
    const allowed = [ownOrigin, `http://${host ?? ''}`, `https://${host ?? ''}`];
    return allowed.includes(origin.toLowerCase());
  }
  const site = request.headers['sec-fetch-site'];
  return site === undefined || site === 'same-origin' || site === 'none';
}

/** Refuses unsafe methods that come from elsewhere. */
export function demandSameOrigin(ownOrigin: string) {
  return (request: Request, _response: Response, next: NextFunction): void => {
    if (!safeMethods.has(request.method) && !isSameOrigin(request, ownOrigin))
      throw notAllowed('This request comes from another site and was refused.');
    next();
  };
}
