import type { TestServer } from './server.ts';

export interface Answer<T = Record<string, unknown>> {
  status: number;
  body: T;
  etag: string | undefined;
  headers: Headers;
}

interface Options {
  body?: unknown;
  /** The revision seen, or the whole header. */
  ifMatch?: number | string;
  headers?: Record<string, string>;
}

/** A browser's side of the API: keeps the session cookie, sends what our own pages send. */
export class Client {
  cookie: string | undefined;

  constructor(readonly server: Pick<TestServer, 'url'>) {}

  get = <T = Record<string, unknown>>(path: string, options?: Options) => this.send<T>('GET', path, options);
  post = <T = Record<string, unknown>>(path: string, body?: unknown, options: Options = {}) =>
    this.send<T>('POST', path, { body, ...options });
  put = <T = Record<string, unknown>>(path: string, body?: unknown, options: Options = {}) =>
    this.send<T>('PUT', path, { body, ...options });
  delete = <T = Record<string, unknown>>(path: string, options?: Options) =>
    this.send<T>('DELETE', path, options);

  async send<T = Record<string, unknown>>(
    method: string,
    path: string,
    options: Options = {},
  ): Promise<Answer<T>> {
    const { body, ifMatch, headers } = options;
    const response = await fetch(`${this.server.url}/api/v1${path}`, {
      method,
      redirect: 'manual',
      headers: {
        ...(method === 'GET' ? {} : { Origin: this.server.url, 'Content-Type': 'application/json' }),
        ...(this.cookie === undefined ? {} : { Cookie: this.cookie }),
        ...(ifMatch === undefined
          ? {}
          : { 'If-Match': typeof ifMatch === 'number' ? `"${ifMatch}"` : ifMatch }),
        ...headers,
      },
      ...(body === undefined ? {} : { body: JSON.stringify(body) }),
    });
    const [cookie] = response.headers.getSetCookie();
    if (cookie !== undefined) this.cookie = cookie.split(';')[0];
    const text = await response.text();
    const json = /json/.test(response.headers.get('Content-Type') ?? '');
    return {
      status: response.status,
      body: (json ? JSON.parse(text) : text) as T,
      etag: response.headers.get('ETag') ?? undefined,
      headers: response.headers,
    };
  }
}
