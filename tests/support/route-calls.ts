import { randomUUID } from 'node:crypto';
import type { RouteDeclaration } from '#backend/http/route.ts';
import type { Answer, Client } from './client.ts';

interface Call {
  /** Values of path parameters; those not given are random ids. */
  parameters?: Record<string, string>;
  /** With the question mark. */
  query?: string;
  body?: unknown;
}

/** The route's name in a list of failures. */
export const nameOf = ({ method, path }: RouteDeclaration): string => `${method.toUpperCase()} ${path}`;

/** The names of a path's parameters, the study's code left out. */
export const idsOf = ({ path }: RouteDeclaration): string[] =>
  [...path.matchAll(/:([A-Za-z]+)/g)].flatMap(([, name]) => (name === 'studyCode' ? [] : [name!]));

/** Calls a declared route with everything a handler may ask for in headers, and a body where it takes one. */
export async function call(
  client: Client,
  declared: RouteDeclaration,
  { parameters = {}, query = '', body = {} }: Call = {},
): Promise<Answer> {
  const path = declared.path.replaceAll(
    /:([A-Za-z]+)/g,
    (_, name: string) => parameters[name] ?? randomUUID(),
  );
  const read = declared.method === 'get';
  return client.send(declared.method.toUpperCase(), path + query, {
    ...(read ? {} : { body, ifMatch: 1 }),
    headers: {
      'Idempotency-Key': randomUUID(),
      ...(declared.bodyType === 'upload' ? { 'X-Vesselry': '1' } : {}),
    },
  });
}

/** An answer as its reader sees it: without the number that each request has. */
export const seen = ({ status, body }: Answer): object =>
  typeof body === 'object' ? { status, body: { ...body, requestId: undefined } } : { status, body };
