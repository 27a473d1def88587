import { afterEach, describe, expect, it, vi } from 'vitest';
import { api, apiFile, ApiProblem, OfflineError, queryString } from './api.ts';

const answer = (status: number, body: unknown, headers: Record<string, string> = {}) =>
  new Response(body === undefined ? null : JSON.stringify(body), {
    status,
    headers: { 'Content-Type': status < 400 ? 'application/json' : 'application/problem+json', ...headers },
  });

function asked(response: Response | Error) {
  const fetching = vi.fn<typeof fetch>(() =>
    response instanceof Error ? Promise.reject(response) : Promise.resolve(response),
  );
  vi.stubGlobal('fetch', fetching);
  return () => {
    const [url, init] = fetching.mock.calls[0]!;
    return { url, init, headers: new Headers(init?.headers) };
  };
}

afterEach(() => vi.unstubAllGlobals());

describe('api', () => {
  it('gives the data and the ETag', async () => {
    asked(answer(200, { state: 'open' }, { ETag: '"3"' }));
    expect(await api('/entries/1')).toEqual({ data: { state: 'open' }, etag: '"3"' });
  });

  it('sends JSON with the revision seen and the idempotency key', async () => {
    const request = asked(answer(200, {}));
    await api('/entries/1', { method: 'PATCH', body: { a: 1 }, ifMatch: 3, idempotencyKey: 'k1' });
    const { url, init, headers } = request();
    expect(url).toBe('/api/v1/entries/1');
    expect(init).toMatchObject({
      method: 'PATCH',
      body: '{"a":1}',
      credentials: 'same-origin',
      cache: 'no-store',
    });
    expect(headers.get('Content-Type')).toBe('application/json');
    expect(headers.get('If-Match')).toBe('"3"');
    expect(headers.get('Idempotency-Key')).toBe('k1');
  });

  it('marks every write as one that no foreign form can send, without a body too', async () => {
    const deletion = asked(answer(204, undefined));
    expect(await api('/session', { method: 'DELETE' })).toEqual({ data: undefined, etag: undefined });
    expect(deletion().headers.get('Content-Type')).toBe('application/json');

    const upload = asked(answer(201, {}));
    await api('/sources', { method: 'POST', body: new FormData() });
    expect(upload().headers.get('X-Vesselry')).toBe('1');
    expect(upload().headers.get('Content-Type')).toBeNull();

    const file = new Blob(['time,flow'], { type: 'text/csv' });
    const bare = asked(answer(201, {}));
    await api('/sources', { method: 'POST', body: file });
    expect(bare().init?.body).toBe(file);
    expect(bare().headers.get('X-Vesselry')).toBe('1');
    expect(bare().headers.get('Content-Type')).toBe('text/csv');
  });

  it('throws the refusal with its slug, its fields and what else was sent', async () => {
    asked(
      answer(422, {
        type: '/problems/fields-refused',
        title: 'Some values were refused',
        detail: 'One value is too high.',
        errors: [{ pointer: '/systolic/2', detail: 'at most 300 mmHg' }],
        revision: 4,
      }),
    );
    const problem = await api('/entries/1').catch((error: unknown) => error);
    expect(problem).toBeInstanceOf(ApiProblem);
    expect(problem).toMatchObject({ status: 422, slug: 'fields-refused', detail: 'One value is too high.' });
    expect((problem as ApiProblem).errors).toEqual([{ pointer: '/systolic/2', detail: 'at most 300 mmHg' }]);
    expect((problem as ApiProblem).members['revision']).toBe(4);
  });

  it('survives a refusal that is no problem document', async () => {
    asked(new Response('<h1>Bad gateway</h1>', { status: 502, statusText: 'Bad Gateway' }));
    await expect(api('/entries/1')).rejects.toMatchObject({ status: 502, title: 'Bad Gateway' });
  });

  it('tells a lost network from a refusal, and a cancelled request from both', async () => {
    asked(new TypeError('Failed to fetch'));
    await expect(api('/entries/1')).rejects.toBeInstanceOf(OfflineError);

    const stop = new AbortController();
    stop.abort();
    asked(new DOMException('stopped', 'AbortError'));
    await expect(api('/entries/1', { signal: stop.signal })).rejects.toMatchObject({ name: 'AbortError' });
  });
});

describe('apiFile', () => {
  it('gives the bytes of an answer, and throws the refusal of one that is refused', async () => {
    asked(new Response('PK', { status: 200, headers: { 'Content-Type': 'application/zip' } }));
    expect(await (await apiFile('/exports/1/download', { method: 'POST', body: {} })).text()).toBe('PK');

    asked(answer(409, { detail: 'It was downloaded already.' }));
    await expect(apiFile('/exports/1/download')).rejects.toMatchObject({ status: 409 });
  });
});

describe('queryString', () => {
  it('leaves out what is not given and encodes the rest', () => {
    expect(queryString({ a: 'x y', b: undefined, c: '', d: 3 })).toBe('?a=x+y&d=3');
    expect(queryString({ a: undefined })).toBe('');
  });
});
