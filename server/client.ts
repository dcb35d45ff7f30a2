import { createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { readFile, readdir, stat, writeFile } from 'node:fs/promises';
import type { Server } from 'node:http';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import type { RequestHandler } from 'express';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '..');
export const clientDir = path.join(root, 'dist');
const stamp = path.join(clientDir, '.sources');

/** Builds the client unless the present build was made from exactly these sources. */
export async function ensureClient(): Promise<void> {
  const sources = await fingerprint();
  if (existsSync(stamp) && (await readFile(stamp, 'utf8')) === sources) return;
  process.stdout.write('Building the client ...\n');
  const { build } = await import('vite');
  // Vite keeps a NODE_ENV that is set: tests would leave React's development build behind for everybody.
  const before = process.env.NODE_ENV;
  process.env.NODE_ENV = 'production';
  try {
    await build({ root, logLevel: 'warn' });
  } finally {
    process.env.NODE_ENV = before;
  }
  await writeFile(stamp, sources);
}

/** Names, sizes and times of everything that the build reads. */
async function fingerprint(): Promise<string> {
  const hash = createHash('sha256').update('production\n');
  for (const place of ['src', 'shared', 'index.html', 'vite.config.ts', 'package-lock.json']) {
    for (const file of await filesBelow(path.join(root, place))) {
      const { size, mtimeMs } = await stat(file);
      hash.update(`${file} ${size} ${mtimeMs}\n`);
    }
  }
  return hash.digest('hex');
}

async function filesBelow(place: string): Promise<string[]> {
  if (!existsSync(place)) return [];
  if (!(await stat(place)).isDirectory()) return [place];
  const entries = await readdir(place, { recursive: true, withFileTypes: true });
  return entries
    .filter((entry) => entry.isFile())
    .map((entry) => path.join(entry.parentPath, entry.name))
    .sort();
}

/** Vite in front of the same API, with hot reload (`npm run dev`). */
export async function viteClient(): Promise<{ middleware: RequestHandler; attach(server: Server): void }> {
  const { createServer } = await import('vite');
  const vite = await createServer({ root, server: { middlewareMode: true, ws: false as never }, appType: 'spa' });
  return { middleware: vite.middlewares as unknown as RequestHandler, attach: () => undefined };
}
