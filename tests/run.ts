import { spawn } from 'node:child_process';
import { readFileSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';

/** `npm test`: types, lint, then every test; `npm run check` leaves out the browser. Closes with `N passed, N failed`. */
const fast = process.argv.includes('--fast');
const report = path.join(os.tmpdir(), `analemma-tests-${process.pid}.json`);

interface Step {
  name: string;
  command: string[];
}

const steps: Step[] = [
  { name: 'types', command: ['tsc', '--noEmit', '-p', '.'] },
  { name: 'lint', command: ['eslint', '--max-warnings', '0', '.'] },
];
const projects = fast ? ['--project', 'node', '--project', 'ui'] : [];
const vitest = [
  'vitest',
  'run',
  ...projects,
  '--reporter=default',
  '--reporter=json',
  `--outputFile.json=${report}`,
];

function run(command: string[]): Promise<number> {
  return new Promise((resolve) => {
    const child = spawn('npx', command, { stdio: ['ignore', 'inherit', 'inherit'] });
    child.on('exit', (code) => resolve(code ?? 1));
  });
}

interface Totals {
  numPassedTests: number;
  numFailedTests: number;
  numPendingTests: number;
  numFailedTestSuites: number;
  success: boolean;
}

let passed = 0;
let failed = 0;
for (const step of steps) {
  const started = Date.now();
  const code = await run(step.command);
  console.log(
    `${step.name}: ${code === 0 ? 'clean' : 'NOT clean'} (${Math.round((Date.now() - started) / 1000)} s)`,
  );
  if (code === 0) passed += 1;
  else failed += 1;
}
const code = await run(vitest);
try {
  const totals = JSON.parse(readFileSync(report, 'utf8')) as Totals;
  passed += totals.numPassedTests;
  failed += totals.numFailedTests;
  if (totals.numPendingTests > 0) {
    console.log(`${totals.numPendingTests} tests were skipped: that counts as failed here.`);
    failed += totals.numPendingTests;
  }
  if (code !== 0 && totals.numFailedTests === 0) failed += 1;
} catch {
  console.log('The test runner left no report.');
  failed += 1;
}
rmSync(report, { force: true });
console.log(`\n${passed} passed, ${failed} failed`);
process.exit(failed === 0 ? 0 : 1);
