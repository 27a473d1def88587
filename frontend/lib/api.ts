const base = '/api/v1';

/** One wrong field of a refused request: where (JSON Pointer) and what to do. */
export interface FieldProblem {
  pointer: string;
  detail: string;
}

interface ProblemBody {
  type?: string;
  slug?: string;
  title?: string;
  detail?: string;
  errors?: FieldProblem[];
  [member: string]: unknown;
}

/** The server's refusal (RFC 9457). `slug` names it, `errors` land on fields, `members` keeps what else it sent. */
export class ApiProblem extends Error {
  readonly status: number;
  readonly slug: string;
  readonly title: string;
  readonly detail: string;
  readonly errors: FieldProblem[];
  readonly members: Record<string, unknown>;

  constructor(status: number, body: ProblemBody) {
    const title = body.title ?? 'The request was refused';
    super(body.detail ?? title);
    this.name = 'ApiProblem';
    this.status = status;
    this.slug = body.slug ?? body.type?.split('/').at(-1) ?? 'unknown';
    this.title = title;
    this.detail = body.detail ?? title;
    this.errors = body.errors ?? [];
    this.members = body;
  }

  /** The number to quote when asking for help with an unexpected error. */
  get requestId(): string | undefined {
    const id = this.members['requestId'];
    return typeof id === 'string' ? id : undefined;
  }
}

/** No answer came: the network or the server is away. What was sent may or may not have arrived. */
export class OfflineError extends Error {
  constructor(cause: unknown) {
    super('The server cannot be reached. What you typed is kept on this device.', { cause });
    this.name = 'OfflineError';
  }
}

export interface RequestOptions {
  method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';
  /** Sent as JSON, except `FormData` and `Blob`, which are sent as uploads; a `Blob` is the bare file. */
  body?: unknown;
  /** The revision or ETag seen; a stale one is answered with 412. */
  ifMatch?: number | string | undefined;
  /** The same key with the same body counts once (DE-04). */
  idempotencyKey?: string | undefined;
  signal?: AbortSignal | undefined;
}

export interface Answer<T> {
  data: T;
  etag: string | undefined;
}

/**
 * Asks the server.
 *
 * @param path below `/api/v1`, beginning with `/`
 * @throws ApiProblem when the server refuses, OfflineError when nobody answers, AbortError when cancelled
 */
export async function api<T>(path: string, options: RequestOptions = {}): Promise<Answer<T>> {
  const response = await accepted(path, options);
  const etag = response.headers.get('ETag') ?? undefined;
  if (response.status === 204 || response.headers.get('Content-Length') === '0')
    return { data: undefined as T, etag };
  return { data: (await response.json()) as T, etag };
}

/** Asks the server for a file. Throws as `api` does. */
export const apiFile = async (path: string, options: RequestOptions = {}): Promise<Blob> =>
  (await accepted(path, options)).blob();

async function accepted(path: string, options: RequestOptions): Promise<Response> {
  const response = await send(path, options);
  noteContact();
  if (!response.ok) throw new ApiProblem(response.status, await problemBody(response));
  return response;
}

async function send(path: string, { method = 'GET', body, ifMatch, idempotencyKey, signal }: RequestOptions) {
  const headers = new Headers({ Accept: 'application/json' });
  const file = body instanceof Blob;
  const upload = file || body instanceof FormData;
  // A header no foreign form can send marks uploads; everything else that writes is JSON (WS-05).
  if (upload) headers.set('X-Vesselry', '1');
  if (file) headers.set('Content-Type', body.type);
  if (!upload && method !== 'GET') headers.set('Content-Type', 'application/json');
  if (ifMatch !== undefined) headers.set('If-Match', typeof ifMatch === 'number' ? `"${ifMatch}"` : ifMatch);
  if (idempotencyKey !== undefined) headers.set('Idempotency-Key', idempotencyKey);
  const payload = upload ? body : body === undefined ? undefined : JSON.stringify(body);
  try {
    return await fetch(base + path, {
      method,
      headers,
      credentials: 'same-origin',
      cache: 'no-store',
      ...(payload === undefined ? {} : { body: payload }),
      ...(signal ? { signal } : {}),
    });
  } catch (cause) {
    if (signal?.aborted) throw cause;
    throw new OfflineError(cause);
  }
}

async function problemBody(response: Response): Promise<ProblemBody> {
  if (!/json/.test(response.headers.get('Content-Type') ?? '')) {
    return { title: response.statusText || `Error ${response.status}` };
  }
  return (await response.json().catch(() => ({}))) as ProblemBody;
}

let contact = Date.now();

function noteContact() {
  contact = Date.now();
}

/** When the server last answered, by this device's clock: what the idle limit of the session counts from. */
export const lastContact = () => contact;

/** `{ a: 'x', b: undefined }` → `?a=x`; for list addresses. */
export function queryString(values: Record<string, string | number | undefined>): string {
  const given = Object.entries(values).filter(([, value]) => value !== undefined && value !== '');
  if (given.length === 0) return '';
  return `?${new URLSearchParams(given.map(([key, value]) => [key, String(value)]))}`;
}
