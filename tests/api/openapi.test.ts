import { Validator } from '@seriousme/openapi-schema-validator';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Client } from '#tests/support/client.ts';
import { call, nameOf } from '#tests/support/route-calls.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aStudy, password, type Member } from '#tests/support/setup-builders.ts';

let server: TestServer;
let investigator: Member;
let studyCode: string;
beforeAll(async () => {
  server = await startTestServer();
  const { study } = await aStudy(server);
  studyCode = study.code;
  investigator = await aMember(server, 'principal-investigator', study);
});
afterAll(() => server.stop());

interface Description {
  jsonSchemaDialect: string;
  paths: Record<string, Record<string, { responses: Record<string, unknown> }>>;
}

// proves XC-14
describe('the description of the API', () => {
  it('is valid OpenAPI 3.1 and lists every declared route, and no other', async () => {
    const { body } = await new Client(server).get<Description>('/openapi.json');
    const result = await new Validator().validate({ ...structuredClone(body) });
    expect(result.valid ? [] : result.errors).toEqual([]);
    expect(body.jsonSchemaDialect).toBe('https://json-schema.org/draft/2020-12/schema');
    const listed = Object.entries(body.paths).flatMap(([path, operations]) =>
      Object.keys(operations).map((method) => `${method} ${path}`),
    );
    const declared = server.routes.map(
      ({ method, path }) => `${method} ${path.replaceAll(/:([A-Za-z]+)/g, '{$1}')}`,
    );
    expect(listed.toSorted()).toEqual(declared.toSorted());
  });

  it('the validator finds a description that is not valid', async () => {
    const { body } = await new Client(server).get<Description>('/openapi.json');
    const broken = structuredClone(body) as unknown as { paths: Record<string, object> };
    broken.paths['no-slash'] = { get: { responses: 7 } };
    expect((await new Validator().validate(broken)).valid).toBe(false);
  });
});

// proves WS-06
describe('the headers of every answer', () => {
  const withoutHeaders = (headers: Headers): string[] => {
    const csp = headers.get('Content-Security-Policy') ?? '';
    const due = ["default-src 'self'", "object-src 'none'", "base-uri 'none'", "frame-ancestors 'none'"];
    return [
      ...due.filter((directive) => !csp.split(';').includes(directive)),
      ...(/unsafe-|https?:|\*/.test(csp) ? [`loose policy: ${csp}`] : []),
      ...(headers.get('X-Content-Type-Options') === 'nosniff' ? [] : ['nosniff']),
      ...(headers.get('Referrer-Policy') === 'no-referrer' ? [] : ['referrer policy']),
      ...(headers.get('X-Powered-By') === null ? [] : ['X-Powered-By']),
      ...(headers.get('Access-Control-Allow-Origin') === null ? [] : ['CORS']),
    ];
  };

  it('of every route, refusals included', async () => {
    const wrong: string[] = [];
    for (const declared of server.routes.filter(({ path }) => !path.startsWith('/session'))) {
      for (const client of [investigator.client, new Client(server)]) {
        const { headers, status } = await call(client, declared, { parameters: { studyCode } });
        const type = headers.get('Content-Type');
        const missing = withoutHeaders(headers);
        if (status >= 400 && !type?.startsWith('application/problem+json')) missing.push(`type ${type}`);
        if (missing.length > 0) wrong.push(`${nameOf(declared)} ${status}: ${missing.join(', ')}`);
      }
    }
    expect(wrong).toEqual([]);
  });

  it.each(['/', '/studies/x/now', '/assets/none.js', '/api/v1/none', '/api/v1/openapi.json', '/%c0%ae'])(
    'of %s',
    async (path) => {
      const response = await fetch(server.url + path);
      await response.arrayBuffer();
      expect(withoutHeaders(response.headers)).toEqual([]);
      expect(response.status).toBeLessThan(500);
    },
  );

  it('an answer of the API is not kept by caches', async () => {
    const { headers } = await investigator.client.get(`/studies/${studyCode}`);
    expect(headers.get('Cache-Control')).toBe('no-store');
  });
});

// proves WS-05
describe('a change', () => {
  const send = (path: string, method: string, headers: Record<string, string>, body: string | undefined) =>
    fetch(`${server.url}/api/v1${path}`, { method, headers, ...(body === undefined ? {} : { body }) });
  const json = { 'Content-Type': 'application/json' };

  it.each([
    ['another origin', { Origin: 'https://elsewhere.example' }],
    ['no origin', {}],
    ['an opaque origin', { Origin: 'null' }],
    ['another scheme', { Origin: 'https://127.0.0.1' }],
    ['a browser that says cross-site', { 'Sec-Fetch-Site': 'cross-site' }],
    ['a browser that says same-site', { 'Sec-Fetch-Site': 'same-site' }],
    ['a browser that says none', { 'Sec-Fetch-Site': 'none' }],
  ])('from %s is refused on every route before anything else', async (_, headers) => {
    const wrong: string[] = [];
    for (const { method, path } of server.routes.filter((each) => each.method !== 'get')) {
      const cookie = { Cookie: investigator.client.cookie! };
      const answer = await send(path, method.toUpperCase(), { ...json, ...cookie, ...headers }, '{}');
      if (answer.status !== 403 || ((await answer.json()) as { slug: string }).slug !== 'cross-origin')
        wrong.push(`${method} ${path}: ${answer.status}`);
    }
    expect(wrong).toEqual([]);
  });

  it.each(['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data; boundary=x'])(
    'as %s, which a plain form can send, is refused',
    async (type) => {
      const body = JSON.stringify({ email: investigator.email, password });
      const answer = await send('/session', 'POST', { Origin: server.url, 'Content-Type': type }, body);
      expect(answer.status).toBe(415);
      expect(answer.headers.getSetCookie()).toEqual([]);
    },
  );

  it('the session cookie cannot be read by scripts, sent by other sites or set from a subdomain', async () => {
    const body = JSON.stringify({ email: investigator.email, password });
    const answer = await send('/session', 'POST', { Origin: server.url, ...json }, body);
    expect(answer.status).toBe(201);
    const [cookie = ''] = answer.headers.getSetCookie();
    for (const part of [/^__Host-/, /; HttpOnly/, /; Secure/, /; SameSite=(Lax|Strict)/, /; Path=\/(;|$)/])
      expect(cookie).toMatch(part);
    expect(cookie).not.toMatch(/Domain=/i);
  });

  it('is never made by a GET: all of them twice, and no table has other rows', async () => {
    const rows = async () => {
      const tables = await server.ownerSql<{ name: string }>(
        `select quote_ident(table_schema) || '.' || quote_ident(table_name) as name from information_schema.tables
         where table_type = 'BASE TABLE' and table_schema = 'public'
           and table_name not in ('session', 'rate_limit')`,
      );
      const counts = await Promise.all(
        tables.map(async ({ name }) => {
          const [row] = await server.ownerSql(
            `select count(*) as n, md5(string_agg(t::text, '' order by t::text)) as m from ${name} t`,
          );
          return [name, row];
        }),
      );
      return Object.fromEntries(counts) as object;
    };
    const before = await rows();
    expect(Object.keys(before).length).toBeGreaterThan(15);
    for (const declared of server.routes.filter(({ method }) => method === 'get')) {
      await call(investigator.client, declared, { parameters: { studyCode } });
      await call(investigator.client, declared, { parameters: { studyCode } });
    }
    expect(await rows()).toEqual(before);
  });
});
