import type { ErrorRequestHandler, RequestHandler } from 'express';
import { OptimisticLockError, UniqueConstraintViolationException } from '@mikro-orm/postgresql';
import { problems, type ProblemSlug } from '#schemas/vocabulary/problems.ts';
import { logger } from './logger.ts';

/** One bad field: where, and what to do. */
export interface FieldProblem {
  pointer: string;
  detail: string;
}

/** An expected refusal: leaves as RFC 9457 `application/problem+json`. */
export class Problem extends Error {
  constructor(
    readonly status: number,
    readonly slug: ProblemSlug,
    /** One sentence for the person at the screen: what happened, what to do. */
    readonly detail: string,
    readonly errors: readonly FieldProblem[] = [],
    /** Members that help the client go on, e.g. the present revision of a stale one. */
    readonly extra: Readonly<Record<string, unknown>> = {},
  ) {
    super(`${slug}: ${detail}`);
  }
}

/** The same answer for what is not there and what is not yours to know of. */
export const notFound = (what = 'This'): Problem =>
  new Problem(404, 'not-found', `${what} does not exist, or is not yours to see.`);

export const notAllowed = (detail: string): Problem => new Problem(403, 'not-allowed', detail);

export const stateForbids = (detail: string): Problem => new Problem(409, 'state-forbids', detail);

export const invalidBody = (errors: FieldProblem[]): Problem =>
  new Problem(422, 'invalid-body', 'Some fields need attention; each is named below.', errors);

const bodyParserProblems: Record<string, Problem> = {
  'entity.too.large': new Problem(413, 'too-large', 'The request is larger than this address accepts.'),
  'entity.parse.failed': new Problem(400, 'unreadable-body', 'The body is not valid JSON.'),
  'encoding.unsupported': new Problem(
    415,
    'wrong-content-type',
    'Send the body without compression, in UTF-8.',
  ),
  'charset.unsupported': new Problem(415, 'wrong-content-type', 'Send the body in UTF-8.'),
  'request.aborted': new Problem(400, 'unreadable-body', 'The request ended before it was whole.'),
  'request.size.invalid': new Problem(400, 'unreadable-body', 'The request ended before it was whole.'),
};

function asProblem(error: unknown): Problem | undefined {
  if (error instanceof Problem) return error;
  if (error instanceof OptimisticLockError) {
    return new Problem(412, 'stale-revision', 'Someone changed this meanwhile; load it again and compare.');
  }
  if (error instanceof UniqueConstraintViolationException) {
    return new Problem(
      409,
      'already-exists',
      'Someone made the same thing a moment ago; load the page again.',
    );
  }
  const { type, status } = error as { type?: string; status?: number };
  if (type !== undefined && type in bodyParserProblems) return bodyParserProblems[type];
  if (error instanceof URIError || status === 400) {
    return new Problem(400, 'invalid-parameter', 'The address could not be read.');
  }
  return undefined;
}

/** Last in the application: every error leaves here, in one form, without a word of the inside (WS-14). */
export const problemHandler: ErrorRequestHandler = (error: unknown, _request, response, next) => {
  if (response.headersSent) {
    next(error);
    return;
  }
  const known = asProblem(error);
  if (known === undefined)
    logger.error({ error: error instanceof Error ? error.stack : String(error) }, 'unexpected');
  const problem =
    known ??
    new Problem(500, 'internal-error', 'Something went wrong on our side; nothing was changed. Try again.');
  response
    .status(problem.status)
    .set('Cache-Control', 'no-store')
    .type('application/problem+json')
    .send(
      JSON.stringify({
        type: `/problems/${problem.slug}`,
        title: problems[problem.slug],
        status: problem.status,
        slug: problem.slug,
        detail: problem.detail,
        ...(problem.errors.length > 0 ? { errors: problem.errors } : {}),
        ...problem.extra,
        requestId: response.locals['requestId'] as string | undefined,
      }),
    );
};

/** Behind all routes of the API. */
export const noSuchRoute: RequestHandler = () => {
  throw notFound('This address');
};
