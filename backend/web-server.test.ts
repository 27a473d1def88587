import { Agent, get, type IncomingMessage, type RequestListener } from 'node:http';
import { setTimeout as sleep } from 'node:timers/promises';
import { afterEach, describe, expect, it } from 'vitest';
import { StartError } from './config/start-error.ts';
import { listen, type WebServer } from './web-server.ts';

let server: WebServer | undefined;
const agent = new Agent({ keepAlive: true });
afterEach(async () => {
  await server?.close();
  server = undefined;
});

async function serving(handler: RequestListener): Promise<WebServer> {
  server = await listen('127.0.0.1', 0);
  server.serve(handler);
  return server;
}
const ask = (path = '/', accept = '*/*') =>
  new Promise<{ status: number; text: string; connection: string | undefined }>((resolve, reject) => {
    get(`${server!.origin}${path}`, { agent, headers: { Accept: accept } }, (response: IncomingMessage) => {
      let text = '';
      response.on('data', (chunk: Buffer) => (text += chunk.toString()));
      response.on('end', () =>
        resolve({ status: response.statusCode ?? 0, text, connection: response.headers.connection }),
      );
      response.on('error', reject);
    }).on('error', reject);
  });

describe('the web server', () => {
  it('answers 503 until the application is there', async () => {
    server = await listen('127.0.0.1', 0);
    expect(await ask()).toMatchObject({ status: 503, text: 'Vesselry is starting.\n' });

    server.serve((_request, response) => void response.end('here'));

    expect(await ask()).toMatchObject({ status: 200, text: 'here' });
  });

  it('finishes the answer under way, then closes', async () => {
    await serving((_request, response) => void sleep(300).then(() => response.end('whole')));
    const answer = ask();
    await sleep(50);

    const closed = server!.close().then(() => 'closed');

    expect(await answer).toMatchObject({ text: 'whole' });
    expect(await Promise.race([closed, sleep(1000, 'still open')])).toBe('closed');
    await expect(ask()).rejects.toThrow(/ECONNREFUSED|hang up/);
  });

  it('is not held open by a kept-alive connection that becomes idle after the close', async () => {
    await serving(
      (request, response) => void sleep(request.url === '/slow' ? 400 : 0).then(() => response.end()),
    );
    await ask('/quick');
    const slow = ask('/slow');
    await sleep(50);
    const began = performance.now();

    await server!.close();
    await slow;

    expect(performance.now() - began).toBeLessThan(1500);
  });

  it('ends streams of events, which have no end of their own', async () => {
    await serving((_request, response) => {
      response.writeHead(200, { 'Content-Type': 'text/event-stream' }).write(': open\n\n');
    });
    const stream = ask('/', 'text/event-stream');
    await sleep(100);
    const began = performance.now();

    await server!.close();

    expect(await stream).toMatchObject({ text: ': open\n\n' });
    expect(performance.now() - began).toBeLessThan(1500);
  });

  it('tells a taken port from a wrong address', async () => {
    server = await listen('127.0.0.1', 0);
    const port = Number(new URL(server.origin).port);

    const taken = listen('127.0.0.1', port);
    await expect(taken).rejects.toBeInstanceOf(StartError);
    await expect(taken).rejects.toThrow(`Port ${port} of 127.0.0.1 is taken`);
    await expect(listen('192.0.2.1', 0)).rejects.toThrow('HOST 192.0.2.1 is no address of this machine');
  });
});
