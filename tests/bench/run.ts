import { spawn } from 'node:child_process';
import { availableParallelism } from 'node:os';

/** `npm run bench`: every part in a process of its own, one after the other, so that none disturbs another. */
const parts: [title: string, file: string, ...args: string[]][] = [
  ['List endpoints at scale 1', 'list-endpoints.ts', '--scale', '1'],
  ['List endpoints at scale 10', 'list-endpoints.ts', '--scale', '10'],
  ['Clash check', 'clash-check.ts'],
  ['First load of the client', 'client-size.ts'],
];

const run = (file: string, args: string[]): Promise<number> =>
  new Promise((resolve) => {
    const child = spawn(process.execPath, ['--import', 'tsx', `tests/bench/${file}`, ...args], {
      stdio: ['ignore', 'inherit', 'inherit'],
    });
    child.on('exit', (code) => resolve(code ?? 1));
  });

console.log(`${availableParallelism()} cores, node ${process.version}`);
let failed = 0;
for (const [title, file, ...args] of parts) {
  console.log(`\n${title}`);
  if ((await run(file, args)) !== 0) {
    console.log(`  ${file} did not finish.`);
    failed += 1;
  }
}
process.exit(failed === 0 ? 0 : 1);
