import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

/**
 * npm run benchmark [-- NAME …]
 *
 * Runs every benchmark, or those named, each in a process of its own and one after the other. They print medians and
 * ratios to a yardstick measured beside them; they assert no times, because the machine decides those.
 */
const benchmarks = [
  'saving-a-reading',
  'participant-list',
  'cold-analyse',
  'bundle-size',
  'form-typing',
  'analysis-mixed-model',
];

const asked = process.argv.slice(2);
const unknown = asked.filter((name) => !benchmarks.includes(name));
if (unknown.length > 0) {
  console.error(`There is no benchmark ${unknown.join(', ')}; there are ${benchmarks.join(', ')}.`);
  process.exit(2);
}

console.log(`Node ${process.version} on ${process.platform}, ${process.arch}`);
for (const name of asked.length > 0 ? asked : benchmarks) {
  console.log(`\n── ${name}`);
  const file = fileURLToPath(new URL(`./${name}.ts`, import.meta.url));
  const { status } = spawnSync(process.execPath, ['--import', 'tsx', file], { stdio: 'inherit' });
  if (status !== 0) process.exitCode = 1;
}
