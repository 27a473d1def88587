import { createHash, randomBytes } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { mkdir, rm } from 'node:fs/promises';
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { join } from 'node:path';
import { pipeline } from 'node:stream/promises';
import type { ObjectStoreSettings } from '../config/setting-groups.ts';
import {
  beginUpload,
  found,
  joinParts,
  openUpload,
  partFile,
  receive,
  Refusal,
  removeForgottenUploads,
} from './local-object-files.ts';

export interface LocalObjectStore {
  settings: ObjectStoreSettings;
  stop: () => Promise<void>;
}

/**
 * A small S3-compatible store for demo and tests: PUT, GET with Range, HEAD, DELETE, multipart uploads; no listing.
 * Loopback only, and only for the access key made at its start. Keys are hashed on disk, so no name reaches a path.
 */
export async function startLocalObjectStore(folder: string): Promise<LocalObjectStore> {
  await mkdir(folder, { recursive: true, mode: 0o700 });
  await removeForgottenUploads(folder);
  const accessKeyId = randomBytes(16).toString('hex');
  const server = createServer((request, response) => {
    const allowed = request.headers.authorization?.includes(`Credential=${accessKeyId}/`);
    const answer = allowed
      ? serve(folder, request, response)
      : Promise.reject(new Refusal(403, 'AccessDenied'));
    answer.catch((error: unknown) => refuse(request, response, error));
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject).listen(0, '127.0.0.1', resolve);
  });
  const { port } = server.address() as AddressInfo;
  return {
    settings: {
      endpoint: `http://127.0.0.1:${port}`,
      region: 'us-east-1',
      bucket: 'vesselry',
      accessKeyId,
      secretAccessKey: randomBytes(16).toString('hex'),
    },
    stop: () =>
      new Promise((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

async function serve(folder: string, request: IncomingMessage, response: ServerResponse): Promise<void> {
  const { pathname, searchParams } = new URL(request.url ?? '/', 'http://store');
  const object = join(folder, createHash('sha256').update(pathname).digest('hex'));
  const uploadId = searchParams.get('uploadId');
  const upload = uploadId === null ? null : openUpload(folder, uploadId);

  switch (`${request.method}${upload ? ' part' : ''}`) {
    case 'HEAD':
      if (pathname.split('/').filter(Boolean).length === 1) return end(response, 200); // the bucket itself
      return sendHead(object, response);
    case 'GET':
      return sendObject(object, request, response);
    case 'PUT':
      return end(response, 200, { ETag: await receive(request, object) });
    case 'DELETE':
      await rm(object, { force: true });
      return end(response, 204);
    case 'POST':
      return sendXml(response, 200, 'InitiateMultipartUploadResult', { UploadId: await beginUpload(folder) });
    case 'PUT part':
      return end(response, 200, { ETag: await receive(request, partFile(upload!, searchParams)) });
    case 'POST part':
      return sendXml(response, 200, 'CompleteMultipartUploadResult', {
        ETag: await joinParts(upload!, object),
      });
    case 'DELETE part':
      await rm(upload!, { recursive: true, force: true });
      return end(response, 204);
    default:
      throw new Refusal(501, 'NotImplemented');
  }
}

async function sendHead(object: string, response: ServerResponse): Promise<void> {
  const { size } = await found(object);
  end(response, 200, { 'Content-Length': size });
}

async function sendObject(object: string, request: IncomingMessage, response: ServerResponse): Promise<void> {
  const { size } = await found(object);
  const range = request.headers.range ? parseRange(request.headers.range, size) : null;
  if (range) {
    const { start, end: last } = range;
    const headers = { 'Content-Range': `bytes ${start}-${last}/${size}`, 'Content-Length': last - start + 1 };
    response.writeHead(206, headers);
  } else {
    response.writeHead(200, { 'Content-Length': size });
  }
  await pipeline(createReadStream(object, range ?? {}), response);
}

function parseRange(header: string, size: number): { start: number; end: number } {
  const [, first, last] = /^bytes=(\d*)-(\d*)$/.exec(header) ?? [];
  const fromEnd = first === '' && last !== '';
  const start = fromEnd ? Math.max(0, size - Number(last)) : Number(first || NaN);
  const end = fromEnd || !last ? size - 1 : Math.min(Number(last), size - 1);
  if (!(start <= end)) throw new Refusal(416, 'InvalidRange');
  return { start, end };
}

function end(response: ServerResponse, status: number, headers: Record<string, string | number> = {}): void {
  response.writeHead(status, headers).end();
}

function sendXml(
  response: ServerResponse,
  status: number,
  element: string,
  fields: Record<string, string>,
): void {
  const inner = Object.entries(fields).map(([name, value]) => `<${name}>${value}</${name}>`);
  response.writeHead(status, { 'Content-Type': 'application/xml' });
  response.end(`<?xml version="1.0" encoding="UTF-8"?><${element}>${inner.join('')}</${element}>`);
}

function refuse(request: IncomingMessage, response: ServerResponse, error: unknown): void {
  if (response.headersSent) return void response.destroy();
  request.resume();
  const { status, code } = error instanceof Refusal ? error : { status: 500, code: 'InternalError' };
  if (request.method === 'HEAD') return end(response, status);
  sendXml(response, status, 'Error', { Code: code, Message: code });
}
