import { createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { readFile, readdir, stat, writeFile } from 'node:fs/promises';
import type { Server } from 'node:http';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { brotliCompress, constants, gzip } from 'node:zlib';
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
  await compressAssets();
  await writeFile(stamp, sources);
}

/** Script and style sheets once, as small as they get: the server then only sends them. */
async function compressAssets(): Promise<void> {
  for (const file of (await filesBelow(path.join(clientDir, 'assets'))).filter((name) =>
    /\.(js|css|svg)$/.test(name),
  )) {
    const plain = await readFile(file);
    const quality = {
      params: { [constants.BROTLI_PARAM_QUALITY]: 11, [constants.BROTLI_PARAM_SIZE_HINT]: plain.length },
    };
    await writeFile(`${file}.br`, await promisify(brotliCompress)(plain, quality));
    await writeFile(`${file}.gz`, await promisify(gzip)(plain, { level: 9 }));
  }
}

/** Sends the compressed copy of an asset that the browser takes; else the next handler sends it plain. */
export function compressedAssets(folder: string): RequestHandler {
  return (req, res, next) => {
    // Asked one by one: of equals the negotiation would take the one that the browser names first, the larger one.
    const encoding = req.acceptsEncodings('br') || req.acceptsEncodings('gzip');
    const name = /^\/([\w.-]+\.(?:js|css|svg))$/.exec(req.path)?.[1];
    const file = name && encoding && path.join(folder, `${name}.${encoding === 'br' ? 'br' : 'gz'}`);
    if (!file || !existsSync(file)) return next();
    res.setHeader('Content-Encoding', encoding);
    res.setHeader('Vary', 'Accept-Encoding');
    res.type(path.extname(name));
    res.sendFile(file, { immutable: true, maxAge: '1y' });
  };
}

/** Names, sizes and times of everything that the build reads. */
async function fingerprint(): Promise<string> {
  const hash = createHash('sha256').update('production, compressed\n');
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
  const vite = await createServer({
    root,
    server: { middlewareMode: true, ws: false as never },
    appType: 'spa',
  });
  return { middleware: vite.middlewares as unknown as RequestHandler, attach: () => undefined };
}
