import type { Page } from 'playwright-core';
import { startBrowserApp } from '../support/browser';

/**
 * Compressed bytes of script (and of style sheets) that a browser with an empty cache takes for the first load of a
 * page, heard in a real browser. Goal: at most 130 kB of script. Run: npx tsx tests/bench/client-size.ts
 */

const GOAL = 130_000;
const pages = [
  ['sign-in page', '/sign-in'],
  ['public page, list of events', '/'],
  ['public page of an event', '/events/combinatorial-structures'],
] as const;

async function weigh(
  page: Page,
  address: string,
): Promise<{ script: number; style: number; files: string[] }> {
  const sizes: Promise<{ type: string; bytes: number; file: string }>[] = [];
  page.on('requestfinished', (request) => {
    const type = request.resourceType();
    if (type !== 'script' && type !== 'stylesheet') return;
    sizes.push(
      request
        .sizes()
        .then((size) => ({
          type,
          bytes: size.responseBodySize,
          file: new URL(request.url()).pathname.split('/').pop() ?? '',
        })),
    );
  });
  await page.goto(address, { waitUntil: 'networkidle' });
  const heard = await Promise.all(sizes);
  const sum = (type: string): number =>
    heard.filter((one) => one.type === type).reduce((total, one) => total + one.bytes, 0);
  return {
    script: sum('script'),
    style: sum('stylesheet'),
    files: heard
      .filter((one) => one.type === 'script')
      .map((one) => `${one.file} ${(one.bytes / 1000).toFixed(1)}`),
  };
}

const app = await startBrowserApp();
const { seedDemo } = await import('../../seeds/run');
await seedDemo();
for (const [name, address] of pages) {
  const context = await app.browser.newContext();
  const { script, style, files } = await weigh(await context.newPage(), app.url + address);
  await context.close();
  console.log(
    `${name.padEnd(28)} script ${(script / 1000).toFixed(1).padStart(6)} kB  ratio to the goal of 130 kB ${(script / GOAL).toFixed(2)}   style sheets ${(style / 1000).toFixed(1)} kB`,
  );
  if (process.argv.includes('--files')) console.log(`  ${files.join('\n  ')}`);
}
await app.stop();
process.exit(0);
