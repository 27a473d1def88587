import { spawnSync } from 'node:child_process';
import { chmod, cp, mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { existsSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';

let project: string;
let calls: string;

/** A project of its own, with programs that only note how they were called in place of npm and Vite. */
beforeEach(async () => {
  project = await mkdtemp(join(tmpdir(), 'vesselry-prepare-'));
  calls = join(project, 'calls.txt');
  await cp(join(import.meta.dirname, '../../scripts'), join(project, 'scripts'), { recursive: true });
  for (const folder of ['bin', 'frontend']) await mkdir(join(project, folder));
  await writeFile(calls, '');
  await writeFile(join(project, 'package-lock.json'), '{}');
  await writeFile(join(project, 'frontend/page.ts'), 'first');
  await writeFile(
    join(project, 'vite.js'),
    `const fs = require('fs');
     fs.appendFileSync(${JSON.stringify(calls)}, 'vite\\n');
     fs.mkdirSync('dist/client', { recursive: true });
     fs.writeFileSync('dist/client/index.html', '');`,
  );
  await program(
    'npm',
    `echo "npm $*" >> ${calls}; mkdir -p node_modules/vite/bin; cp vite.js node_modules/vite/bin`,
  );
});
afterEach(() => rm(project, { recursive: true }));

async function program(name: string, script: string): Promise<string> {
  const file = join(project, 'bin', name);
  await writeFile(file, `#!/bin/sh\n${script}\n`);
  await chmod(file, 0o755);
  return file;
}
function prepare(args: string[] = [], environment: Record<string, string> = {}) {
  const env = { PATH: `${join(project, 'bin')}:/usr/bin:/bin`, ...environment };
  const run = spawnSync(process.execPath, ['scripts/prepare.mjs', ...args], {
    cwd: project,
    env,
    encoding: 'utf8',
  });
  return { status: run.status, output: run.stdout + run.stderr };
}
const called = async () => (await readFile(calls, 'utf8')).trim().split('\n').filter(Boolean);

describe('the preparation', () => {
  it('installs packages once, and again when the lock file changes', async () => {
    expect(prepare()).toMatchObject({
      status: 0,
      output: expect.stringContaining('installing packages') as string,
    });
    expect(prepare()).toEqual({ status: 0, output: '' });
    expect(await called()).toEqual(['npm ci --no-audit --no-fund']);

    await writeFile(join(project, 'package-lock.json'), '{ "changed": true }');
    prepare();

    expect(await called()).toHaveLength(2);
  });

  it('repeats an installation that broke off', async () => {
    await program('npm', `mkdir -p node_modules; echo "npm broke" >> ${calls}; exit 1`);
    expect(prepare()).toMatchObject({
      status: 1,
      output: expect.stringContaining('could not be installed') as string,
    });
    expect(existsSync(join(project, 'node_modules/.vesselry-lock'))).toBe(false);

    prepare();

    expect(await called()).toEqual(['npm broke', 'npm broke']);
  });

  it('builds the client once, and again when a source changes or the build is gone', async () => {
    prepare(['--client']);
    prepare(['--client']);
    expect((await called()).filter((call) => call === 'vite')).toHaveLength(1);

    await writeFile(join(project, 'frontend/page.ts'), 'second');
    prepare(['--client']);
    await rm(join(project, 'dist/client'), { recursive: true });
    prepare(['--client']);

    expect((await called()).filter((call) => call === 'vite')).toHaveLength(3);
  });

  it('builds no client unless asked to', async () => {
    prepare();

    expect(await called()).not.toContain('vite');
  });

  it('names the version that it needs on an older Node', async () => {
    const file = join(project, 'scripts/prepare.mjs');
    const script = await readFile(file, 'utf8');
    await writeFile(file, script.replace(/const oldestNode = .*;/, 'const oldestNode = [999, 1];'));

    const { status, output } = prepare();

    expect(status).toBe(1);
    expect(output).toContain(`Vesselry needs Node 999.1 or newer; this is Node ${process.versions.node}.`);
    expect(await called()).toEqual([]);
  });

  it('takes the browser that CHROMIUM names, and refuses a name of nothing', async () => {
    const browser = await program('some-browser', 'exit 0');

    expect(prepare(['--chromium'], { CHROMIUM: browser }).status).toBe(0);
    expect(prepare(['--chromium'], { CHROMIUM: `${browser}-gone` })).toMatchObject({
      status: 1,
      output: expect.stringContaining('which is no program') as string,
    });
  });

  it('takes the chromium on PATH', async () => {
    await program('chromium', 'exit 0');

    expect(prepare(['--chromium']).status).toBe(0);
  });

  it('installs chromium from Debian, asking nothing, and names the ways out where it cannot', async () => {
    const path = { PATH: join(project, 'bin') };
    for (const name of ['mkdir', 'cp']) await program(name, `exec /bin/${name} "$@"`);
    await program('sudo', 'shift; exec "$@"');
    await program('true', 'exit 0');
    await program('env', 'export "$1"; shift; exec "$@"');
    await program('apt-get', `echo "apt-get $* ($DEBIAN_FRONTEND)" >> ${calls}; exit 1`);

    expect(prepare(['--chromium'], path)).toMatchObject({
      status: 1,
      output: expect.stringMatching(/Two ways out:\ninstall it .*, or set CHROMIUM/) as string,
    });

    await program(
      'apt-get',
      `echo "apt-get $* ($DEBIAN_FRONTEND)" >> ${calls}
       [ "$1" = install ] && printf '#!/bin/sh\\n' > ${project}/bin/chromium && /bin/chmod 755 ${project}/bin/chromium
       exit 0`,
    );
    expect(prepare(['--chromium'], path).status).toBe(0);
    expect((await called()).slice(1)).toEqual([
      'apt-get update (noninteractive)',
      'apt-get update (noninteractive)',
      'apt-get install -y --no-install-recommends chromium (noninteractive)',
    ]);
  });
});
