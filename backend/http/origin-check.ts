import type { RequestHandler } from 'express';
import { Problem } from './problem.ts';

const safe = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses a change that another site could have sent (WS-05): the browser must say `same-origin`, or,
 * where it says nothing, `Origin` must be ours; and the content type must be one that no plain form can send.
 */
export function originCheck(publicUrl: string): RequestHandler {
  const ownOrigin = new URL(publicUrl).origin;
  return (request, _response, next) => {
    if (safe.has(request.method)) {
      next();
      return;
    }
    const site = request.get('Sec-Fetch-Site');
    const own = site === undefined ? request.get('Origin') === ownOrigin : site === 'same-origin';
    if (!own) throw new Problem(403, 'cross-origin', 'Changes are accepted from this site’s own pages only.');
    const upload = request.get('X-Vesselry') === '1';
    const empty =
      request.get('Content-Length') === '0' ||
      (request.get('Transfer-Encoding') === undefined && request.get('Content-Length') === undefined);
    if (!upload && !empty && !request.is('application/json')) {
      throw new Problem(415, 'wrong-content-type', 'Send the body as application/json.');
    }
    next();
  };
}
