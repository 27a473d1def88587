// Runs before `start`, `dev` and `test`, on a fresh clone too: plain Node, no packages.
import { spawnSync } from 'node:child_process';
import { existsSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { findExecutable, installDebianPackage, isExecutable } from './lib/debian.mjs';
import { fingerprint, isMarked } from './lib/fingerprint.mjs';

const root = fileURLToPath(new URL('..', import.meta.url));
const oldestNode = [20, 19];

requireNode();
installPackages();
if (process.argv.includes('--client')) buildClient();
if (process.argv.includes('--chromium')) findChromium();

function requireNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major > oldestNode[0] || (major === oldestNode[0] && minor >= oldestNode[1])) return;
  stop(`Vesselry needs Node ${oldestNode.join('.')} or newer; this is Node ${process.versions.node}.`);
}

/** The mark is written last, so an installation that broke off is made again. */
function installPackages() {
  const mark = fingerprint(root, ['package-lock.json'], process.version);
  const markFile = join(root, 'node_modules/.vesselry-lock');
  if (isMarked(markFile, mark)) return;
  say('installing packages, about a minute');
  if (!run('npm', 'ci', '--no-audit', '--no-fund')) stop('The packages could not be installed; see above.');
  writeFileSync(markFile, `${mark}\n`);
}

function buildClient() {
  const sources = ['frontend', 'schemas', 'analysis', 'package-lock.json', 'tsconfig.json'];
  const mark = fingerprint(root, [...sources, 'vite.config.ts', 'tailwind.config.ts'], process.version);
  const markFile = join(root, 'dist/.vesselry-client');
  if (isMarked(markFile, mark) && existsSync(join(root, 'dist/client/index.html'))) return;
  say('building the client');
  if (!run(process.execPath, 'node_modules/vite/bin/vite.js', 'build', '--logLevel', 'warn')) {
    stop('The client could not be built; see above.');
  }
  writeFileSync(markFile, `${mark}\n`);
}

function findChromium() {
  const chosen = process.env.CHROMIUM;
  if (chosen && !isExecutable(chosen)) stop(`CHROMIUM names ${chosen}, which is no program.`);
  if (chosen || findExecutable('chromium')) return;
  say('installing the Debian package chromium for the browser tests');
  if (installDebianPackage('chromium') && findExecutable('chromium')) return;
  stop(
    'The browser tests need Chromium, and this account may not install it. Two ways out:\n' +
      'install it (as root: apt-get install chromium), or set CHROMIUM to the path of one.',
  );
}

function run(command, ...args) {
  return spawnSync(command, args, { cwd: root, stdio: 'inherit' }).status === 0;
}

function say(text) {
  console.log(`Vesselry: ${text}`);
}

function stop(text) {
  console.error(`\n${text}`);
  process.exit(1);
}
