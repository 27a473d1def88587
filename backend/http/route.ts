import { Router, type Request, type Response } from 'express';
import type { Action, SubjectName } from '#schemas/abilities/ability.ts';
import type { ActKind } from '#schemas/vocabulary/act-kinds.ts';
import { currentActor } from './actor.ts';
import { invalidBody, notAllowed, notFound, Problem } from './problem.ts';
import { illegalTexts, problemsOf } from './validate.ts';

type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';

/** Who may call at all; the handler then asks about the loaded row. */
export type Gate = 'public' | 'signed-in' | 'person' | [Action, SubjectName];

export interface RouteDeclaration {
  method: Method;
  /** The whole path below `/api/v1`, with named parameters: `/studies/:studyCode/visits/:visitId`. */
  path: string;
  summary: string;
  gate: Gate;
  /** JSON Schema 2020-12 of the body; a route without one refuses a body. */
  body?: object;
  /** Upload routes read the stream themselves; everything else is JSON. */
  bodyType?: 'json' | 'upload';
  /** JSON Schema of the query string's members, all text. */
  query?: object;
  /** Status and JSON Schema of the answer; `null` for an answer without JSON. */
  responds: { status: number; body: object | null };
  /** The kinds of act it may write; `null` for a read, which changes nothing. */
  acts: readonly ActKind[] | null;
  handler: (request: Request, response: Response) => Promise<void> | void;
}

/** All routes of the application, as declared; the OpenAPI document and the permission walk read it. */
export interface RouteTable {
  readonly router: Router;
  readonly declared: RouteDeclaration[];
  route: (declaration: RouteDeclaration) => void;
}

const uuid = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/;

/** A path parameter that is a row's id: anything else is simply not there. */
export function idParameter(request: Request, name: string): string {
  const value = request.params[name];
  if (typeof value !== 'string' || !uuid.test(value)) throw notFound();
  return value;
}

function assertGate(gate: Gate, request: Request): void {
  if (gate === 'public') return;
  const actor = currentActor();
  if (actor.personId === null) throw new Problem(401, 'not-signed-in', 'Sign in and try again.');
  if (gate === 'signed-in') return;
  const { studyCode } = request.params;
  if (studyCode !== undefined && studyCode !== request.res?.locals['studyCode']) throw notFound('This study');
  if (gate === 'person') return;
  const [action, subject] = gate;
  if (!actor.ability.can(action, subject)) {
    // Reading what one may not know of: it is not there. Acting: said plainly.
    throw action === 'read'
      ? notFound()
      : notAllowed(`As ${actor.role.replaceAll('-', ' ')} you may not do this.`);
  }
}

function assertBody(declaration: RouteDeclaration, request: Request): void {
  if (declaration.method === 'get' || declaration.bodyType === 'upload') return;
  if (declaration.body === undefined) return;
  if (request.body === undefined) {
    throw new Problem(400, 'unreadable-body', 'Send a JSON body with content type application/json.');
  }
  const found = [...illegalTexts(request.body), ...problemsOf(declaration.body, request.body)];
  if (found.length > 0) throw invalidBody(found);
}

function assertQuery(declaration: RouteDeclaration, request: Request): void {
  const query = request.query as Record<string, unknown>;
  for (const [name, value] of Object.entries(query)) {
    if (typeof value !== 'string') {
      throw new Problem(
        400,
        'invalid-parameter',
        `The parameter ${name.slice(0, 40)} may be given once only.`,
      );
    }
  }
  const schema = declaration.query ?? { type: 'object', additionalProperties: false };
  const found = problemsOf(schema, { ...query });
  if (found.length > 0)
    throw new Problem(400, 'invalid-parameter', 'A parameter of the address is not valid.', found);
}

/** Makes the table that the application and its modules declare their routes in. */
export function routeTable(): RouteTable {
  const router = Router({ caseSensitive: true });
  const declared: RouteDeclaration[] = [];
  const route = (declaration: RouteDeclaration): void => {
    if (declaration.method !== 'get' && declaration.acts === null) {
      throw new Error(`${declaration.method} ${declaration.path} changes something but names no act.`);
    }
    declared.push(declaration);
    router[declaration.method](declaration.path, async (request, response) => {
      assertGate(declaration.gate, request);
      assertQuery(declaration, request);
      assertBody(declaration, request);
      response.set('Cache-Control', 'no-store');
      await declaration.handler(request, response);
    });
  };
  return { router, declared, route };
}
