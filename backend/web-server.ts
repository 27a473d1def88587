import { createServer, type RequestListener, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { localOrigin } from './config/setting-groups.ts';
import { StartError } from './config/start-error.ts';

export interface WebServer {
  server: Server;
  /** Where this machine finds it; with port 0 the one that was free. */
  origin: string;
  /** Until the first handler is given, every request is answered 503. */
  serve: (handler: RequestListener) => void;
  /** Takes no new connection and waits for the answers under way. */
  close: () => Promise<void>;
}

/** How long answers under way may still take once we are stopping. */
const graceMilliseconds = 10_000;

const starting: RequestListener = (_request, response) => {
  response.writeHead(503, { 'Retry-After': '2', 'Content-Type': 'text/plain; charset=utf-8' });
  response.end('Vesselry is starting.\n');
};

/**
 * Takes the port before anything else is started, so that a second start fails early and touches nothing.
 * @throws StartError when the port is taken or not ours to take
 */
export async function listen(host: string, port: number): Promise<WebServer> {
  let handler = starting;
  const eventStreams = new Set<ServerResponse>();
  const server = createServer((request, response) => {
    if (request.headers.accept?.includes('text/event-stream')) {
      eventStreams.add(response);
      response.once('close', () => eventStreams.delete(response));
    }
    handler(request, response);
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', (error) => reject(explain(error, host, port)));
    server.listen(port, host, resolve);
  });
  return {
    server,
    origin: localOrigin(host, (server.address() as AddressInfo).port),
    serve: (next) => {
      handler = next;
    },
    close: () => closeSoon(server, eventStreams),
  };
}

function closeSoon(server: Server, eventStreams: Set<ServerResponse>): Promise<void> {
  // A kept-alive connection that becomes idle after the close would hold it open for seconds.
  const idle = setInterval(() => server.closeIdleConnections(), 100);
  const last = setTimeout(() => server.closeAllConnections(), graceMilliseconds);
  for (const response of eventStreams) response.end(); // they have no end of their own
  return new Promise((resolve) => {
    server.close(() => {
      clearInterval(idle);
      clearTimeout(last);
      resolve();
    });
  });
}

function explain(error: NodeJS.ErrnoException, host: string, port: number): Error {
  const reasons: Record<string, string> = {
    EADDRINUSE:
      `Port ${port} of ${host} is taken; perhaps Vesselry is running already. ` +
      `Stop that program, or choose another port: PORT=${port + 1} npm start`,
    EACCES: `Port ${port} may be taken by the administrator only. Choose one from 1024 up with PORT.`,
    EADDRNOTAVAIL: `HOST ${host} is no address of this machine.`,
    ENOTFOUND: `HOST ${host} is not known as a name.`,
  };
  const reason = reasons[error.code ?? ''];
  return reason ? new StartError(reason, { cause: error }) : error;
}
