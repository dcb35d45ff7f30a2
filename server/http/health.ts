import { statfs } from 'node:fs/promises';
import path from 'node:path';
import type { RequestHandler } from 'express';
import { QueryTypes } from 'sequelize';
import { env } from '../env';
import { sequelize } from '../db/connection';
import { transaction } from '../db/transaction';

/** Database writable, disk, age of the oldest due job. 200 when fit for work, 503 with the reason when not. */
export const health: RequestHandler = async (_req, res) => {
  res.setHeader('Cache-Control', 'no-store');
  try {
    await transaction(() => sequelize.query('SELECT 1'));
    const [due] = await sequelize.query<{ oldest: string | null; n: number }>(
      `SELECT min(run_at) AS oldest, count(*) AS n FROM jobs WHERE state = 'queued'`,
      { type: QueryTypes.SELECT },
    );
    const disk = await statfs(path.dirname(env.DATABASE_FILE));
    const oldest = due?.oldest ? Math.max(0, Math.round((Date.now() - Date.parse(due.oldest)) / 1000)) : 0;
    res.status(200).json({
      status: 'ok',
      database: 'writable',
      diskFreeBytes: disk.bavail * disk.bsize,
      jobsQueued: due?.n ?? 0,
      oldestJobSeconds: oldest,
    });
  } catch (error) {
    res.status(503).json({ status: 'failing', reason: (error as Error).message });
  }
};
