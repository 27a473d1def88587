import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { gzipSync } from 'node:zlib';
import { build } from 'vite';
import { printTable, ratio } from './measure.ts';

/**
 * JavaScript that the browser must have before the first page draws: the module of `index.html` and what it imports
 * statically, gzipped, against React with its DOM renderer alone.
 *
 * `node --import tsx tests/benchmarks/bundle-size.ts`, after `npm run build`
 */
const client = fileURLToPath(new URL('../../dist/client', import.meta.url));
if (!existsSync(join(client, 'index.html'))) throw new Error('There is no client yet: npm run build');

const page = readFileSync(join(client, 'index.html'), 'utf8');
const entries = [
  ...page.matchAll(/(?:<script type="module"[^>]*src|rel="modulepreload"[^>]*href)="([^"]+)"/g),
];
const files = new Set<string>();
for (const [, address = ''] of entries) follow(join(client, address));

/** Minified modules begin with their imports; `import(…)` is fetched later and does not count. */
function follow(file: string): void {
  if (files.has(file)) return;
  files.add(file);
  const text = readFileSync(file, 'utf8');
  const imports = [
    ...text.matchAll(/(?:^|[;}])(?:import|export)\s*(?:[\w*{][^"'();]*from\s*)?"(\.\/[^"]+\.js)"/g),
  ];
  for (const [, address = ''] of imports) follow(join(dirname(file), address));
}

const gzipped = (text: string | Buffer): number => gzipSync(text, { level: 9 }).length;
const kilobytes = (bytes: number): string => `${(bytes / 1000).toFixed(1)} kB`;

/** React with its DOM renderer as the same builder makes it: what a page of one line would need. */
async function reactAlone(): Promise<number> {
  const name = 'virtual:page';
  const built = await build({
    configFile: false,
    logLevel: 'error',
    root: fileURLToPath(new URL('../..', import.meta.url)),
    build: { write: false, modulePreload: { polyfill: false }, rollupOptions: { input: name } },
    plugins: [
      {
        name: 'one-line-page',
        resolveId: (id) => (id === name ? name : null),
        load: (id) =>
          id === name
            ? `import { createRoot } from 'react-dom/client'; createRoot(document.body).render('here');`
            : null,
      },
    ],
  });
  const [output] = Array.isArray(built) ? built : [built];
  if (output === undefined || !('output' in output)) throw new Error('The builder gave nothing.');
  return output.output.reduce((sum, file) => sum + (file.type === 'chunk' ? gzipped(file.code) : 0), 0);
}

const own = [...files].reduce((sum, file) => sum + gzipped(readFileSync(file)), 0);
const alone = await reactAlone();
console.log('JavaScript before the first page, gzipped');
printTable(
  ['what', 'size', 'client / it'],
  [
    [`client, ${files.size} files`, kilobytes(own), ''],
    ['React alone', kilobytes(alone), ratio(own / alone)],
  ],
);
