import { GetObjectCommand, PutObjectCommand, S3Client } from '@aws-sdk/client-s3';
import { createHash, randomBytes } from 'node:crypto';
import { mkdir, mkdtemp, readdir, rm, utimes } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Readable } from 'node:stream';
import { buffer } from 'node:stream/consumers';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startLocalObjectStore, type LocalObjectStore } from './local-object-store.ts';
import { ObjectMissing, ObjectTooLarge, openObjectStore, type ObjectStore } from './object-store.ts';

let folder: string;
let local: LocalObjectStore;
let store: ObjectStore;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'vesselry-objects-'));
  local = await startLocalObjectStore(folder);
  store = openObjectStore(local.settings);
});

afterAll(async () => {
  store.close();
  await local.stop();
  await rm(folder, { recursive: true });
});

const mebibyte = 1024 * 1024;
const chunks = (bytes: Buffer) => Readable.from(bytes.length > 0 ? [bytes] : [], { objectMode: false });
const read = async (stream: Promise<Readable>) => buffer(await stream);

describe('the object store', () => {
  it.each([0, 1, 5 * mebibyte, 5 * mebibyte + 1, 12 * mebibyte])(
    'gives %i bytes back as they went in',
    async (size) => {
      const bytes = randomBytes(size);
      const stored = await store.put(chunks(bytes), { limit: 64 * mebibyte, contentType: 'application/pdf' });

      expect(stored.size).toBe(size);
      expect(stored.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
      expect((await read(store.get(stored.key))).equals(bytes)).toBe(true);
      expect(await store.head(stored.key)).toEqual({ size });
    },
  );

  it('gives a part of an object', async () => {
    const { key } = await store.put(chunks(Buffer.from('0123456789')), { limit: 10 });

    expect((await read(store.getRange(key, 2, 4))).toString()).toBe('234');
    expect((await read(store.getRange(key, 8, 99))).toString()).toBe('89');
    await expect(store.getRange(key, 10, 12)).rejects.toThrow('InvalidRange');
  });

  it.each([100, 9 * mebibyte])(
    'refuses an object above a limit of %i bytes and keeps nothing of it',
    async (limit) => {
      const before = await readdir(folder, { recursive: true });
      const endless = Readable.from(
        (function* () {
          for (;;) yield randomBytes(mebibyte);
        })(),
      );

      await expect(store.put(endless, { limit })).rejects.toBeInstanceOf(ObjectTooLarge);

      expect(endless.destroyed).toBe(true);
      const left = (await readdir(folder, { recursive: true })).filter((name) => name !== 'uploads');
      expect(left.sort()).toEqual(before.filter((name) => name !== 'uploads').sort());
    },
  );

  it('passes on the error of a source that breaks off', async () => {
    const broken = Readable.from(
      (async function* () {
        yield randomBytes(10);
        throw new Error('the line went dead');
      })(),
    );

    await expect(store.put(broken, { limit: 100 })).rejects.toThrow('the line went dead');
  });

  it('says what is missing, and deletes without complaint', async () => {
    const { key } = await store.put(chunks(Buffer.from('x')), { limit: 1 });
    expect(await store.exists(key)).toBe(true);

    await store.delete(key);
    await store.delete(key);

    expect(await store.exists(key)).toBe(false);
    await expect(store.get(key)).rejects.toBeInstanceOf(ObjectMissing);
    await expect(store.getRange(key, 0, 1)).rejects.toBeInstanceOf(ObjectMissing);
  });

  it('answers that the bucket is there', async () => {
    await expect(store.check()).resolves.toBeUndefined();
  });
});

describe('the local store', () => {
  it('keeps no name of an object on disk', async () => {
    const { key } = await store.put(chunks(Buffer.from('x')), { limit: 1 });

    const names = await readdir(folder, { recursive: true });

    expect(names.some((name) => name.includes(key))).toBe(false);
  });

  it('keeps its objects over a restart, under a new access key', async () => {
    const { key } = await store.put(chunks(Buffer.from('still here')), { limit: 10 });
    const again = await startLocalObjectStore(folder);
    const reopened = openObjectStore(again.settings);

    expect((await read(reopened.get(key))).toString()).toBe('still here');
    expect(again.settings.accessKeyId).not.toBe(local.settings.accessKeyId);

    reopened.close();
    await again.stop();
  });

  it('clears parts away that were forgotten for more than a day', async () => {
    const [old, fresh] = [join(folder, 'uploads', 'old'), join(folder, 'uploads', 'fresh')];
    await mkdir(old);
    await mkdir(fresh);
    await utimes(old, new Date(), new Date(Date.now() - 25 * 3600 * 1000));

    const again = await startLocalObjectStore(folder);

    expect(await readdir(join(folder, 'uploads'))).toEqual(['fresh']);
    await again.stop();
    await rm(fresh, { recursive: true });
  });

  it('refuses a caller without its access key', async () => {
    const { key } = await store.put(chunks(Buffer.from('x')), { limit: 1 });
    const stranger = openObjectStore({ ...local.settings, accessKeyId: 'somebody-else' });

    await expect(stranger.get(key)).rejects.toThrow('AccessDenied');
    expect((await fetch(`${local.settings.endpoint}/vesselry/${key}`)).status).toBe(403);
    stranger.close();
  });

  it('satisfies a client with the standard settings for buffers', async () => {
    const { endpoint, region, accessKeyId, secretAccessKey } = local.settings;
    const client = new S3Client({
      endpoint: endpoint!,
      region,
      credentials: { accessKeyId, secretAccessKey },
      forcePathStyle: true,
    });
    const place = { Bucket: 'vesselry', Key: 'a name with / and ä' };

    await client.send(new PutObjectCommand({ ...place, Body: 'body' }));
    const answer = await client.send(new GetObjectCommand({ ...place, Range: 'bytes=-3' }));

    expect(await answer.Body?.transformToString()).toBe('ody');
    client.destroy();
  });
});
