import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { mkdir, open, rename, rm, stat } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import type { Request, Response } from 'express';
import { fileTypeFromFile } from 'file-type';
import multer from 'multer';
import { Problem } from '@shared/http/problem';
import { newId } from '../db/id';
import { env } from '../env';

/** A file that arrived: still in the temporary folder; kept only by `keepUpload`. */
export interface ReceivedFile {
  path: string;
  /** As the sender's computer named it; metadata only, never a path here. */
  originalName: string;
  bytes: number;
  sha256: string;
  /** By content, never by name or header. */
  type: string;
}

/** Real types that are accepted anywhere, with the extensions that their names may carry. */
const ACCEPTED: Record<string, string[]> = {
  'application/pdf': ['pdf'],
  'application/vnd.openxmlformats-officedocument.presentationml.presentation': ['pptx'],
  'application/vnd.oasis.opendocument.presentation': ['odp'],
  'application/zip': ['zip', 'key'],
  'image/png': ['png'],
  'image/jpeg': ['jpg', 'jpeg'],
};

const temporary = path.join(os.tmpdir(), `analemma-uploads-${process.pid}`);

/** Streams one file of a multipart body to the temporary folder; the other fields become the body. */
export async function receiveUpload(
  req: Request,
  res: Response,
  limits: { field: string; maxBytes: number },
): Promise<ReceivedFile | undefined> {
  if (!req.is('multipart/form-data')) return undefined;
  await mkdir(temporary, { recursive: true });
  const parser = multer({
    dest: temporary,
    limits: { fileSize: limits.maxBytes, files: 1, fields: 30, fieldSize: 100_000, parts: 32 },
    defParamCharset: 'utf8',
  }).single(limits.field);
  await new Promise<void>((resolve, reject) =>
    parser(req, res, (error: unknown) => (error ? reject(error) : resolve())),
  );
  req.body = { ...(req.body as object) };
  if (!req.file) return undefined;
  const file = { path: req.file.path, originalName: cleanName(req.file.originalname), bytes: req.file.size };
  try {
    return { ...file, sha256: await sha256Of(file.path), type: await realType(file.path, file.originalName) };
  } catch (error) {
    await rm(file.path, { force: true });
    throw error;
  }
}

/** No folders, no control characters, at most 200 characters. */
function cleanName(name: string): string {
  const base = name.split(/[\\/]/).pop() ?? '';
  return base.replace(/\p{Cc}/gu, '').slice(-200) || 'file';
}

async function realType(file: string, name: string): Promise<string> {
  const found = await fileTypeFromFile(file);
  const extension = name.split('.').pop()?.toLowerCase() ?? '';
  const allowed = found && ACCEPTED[found.mime];
  if (!allowed) {
    throw new Problem(
      415,
      'upload.kind',
      'Accepted are PDF, PPTX, ODP, KEY, ZIP, PNG and JPEG; the content of this file is none of them.',
      {
        file: 'Accepted are PDF, PPTX, ODP, KEY, ZIP, PNG and JPEG; the content of this file is none of them.',
      },
    );
  }
  if (!allowed.includes(extension)) {
    const message = `The name says .${extension}, but the content is ${allowed.join(' or ')}. Rename or export the file again.`;
    throw new Problem(415, 'upload.kind', message, { file: message });
  }
  return found.mime;
}

async function sha256Of(file: string): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(file)) hash.update(chunk as Buffer);
  return hash.digest('hex');
}

/** Moves the file into the uploads folder under a new id, flushed to disk; returns that name. Call it before the transaction that records it. */
export async function keepUpload(file: ReceivedFile): Promise<string> {
  const name = newId();
  await mkdir(env.UPLOADS_DIR, { recursive: true });
  const target = path.join(env.UPLOADS_DIR, name);
  const handle = await open(file.path, 'r+');
  await handle.sync().finally(() => handle.close());
  await rename(file.path, target).catch(async (error: NodeJS.ErrnoException) => {
    if (error.code !== 'EXDEV') throw error;
    const { copyFile } = await import('node:fs/promises');
    await copyFile(file.path, target);
  });
  return name;
}

/** Removes what was not kept. */
export async function discardUpload(file: ReceivedFile): Promise<void> {
  await rm(file.path, { force: true });
}

/** Bytes as an answer: from the uploads folder, or made on the fly. */
export interface FileResponse {
  storedName?: string;
  content?: Buffer | string;
  downloadName: string;
  type: string;
  /** Shown in the browser (PDF and images, in a sandbox) instead of saved. */
  inline?: boolean;
  /** Cacheable answers of public feeds. */
  etag?: string;
}
export const fileResponse = (file: FileResponse): FileResponse => file;

const INLINE = new Set(['application/pdf', 'image/png', 'image/jpeg']);

export async function sendFile(req: Request, res: Response, file: FileResponse): Promise<void> {
  const inline = file.inline === true && (INLINE.has(file.type) || file.type.startsWith('text/calendar'));
  const fallback = file.downloadName.replace(/[^\x20-\x7e]|["\\%]/g, '_');
  res.setHeader('Content-Type', file.type);
  res.setHeader('X-Content-Type-Options', 'nosniff');
  res.setHeader('Content-Security-Policy', "default-src 'none'; style-src 'unsafe-inline'; sandbox");
  res.setHeader(
    'Content-Disposition',
    `${inline ? 'inline' : 'attachment'}; filename="${fallback}"; filename*=UTF-8''${encodeURIComponent(file.downloadName).replace(/['()]/g, escape)}`,
  );
  res.setHeader('Cache-Control', file.etag ? 'private, max-age=0, must-revalidate' : 'private, no-store');
  if (file.etag) {
    res.setHeader('ETag', file.etag);
    if (req.headers['if-none-match'] === file.etag) {
      res.status(304).end();
      return;
    }
  }
  if (file.content !== undefined) {
    res.status(200).send(Buffer.isBuffer(file.content) ? file.content : Buffer.from(file.content, 'utf8'));
    return;
  }
  const stored = path.join(env.UPLOADS_DIR, path.basename(file.storedName ?? ''));
  const { size } = await stat(stored).catch(() => {
    throw new Problem(404, 'not_found', 'The file is no longer here.');
  });
  res.setHeader('Content-Length', String(size));
  await new Promise<void>((resolve, reject) => {
    createReadStream(stored)
      .on('error', reject)
      .pipe(res)
      .on('finish', resolve)
      .on('close', resolve)
      .on('error', reject);
  });
}
