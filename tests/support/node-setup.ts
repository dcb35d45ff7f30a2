import { mkdtempSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { afterAll } from 'vitest';

/** Each test file has its own database and uploads folder; set before anything reads the environment. */
const folder = mkdtempSync(path.join(os.tmpdir(), 'analemma-test-'));
process.env.NODE_ENV = 'test';
process.env.DATABASE_FILE = path.join(folder, 'test.sqlite');
process.env.UPLOADS_DIR = path.join(folder, 'uploads');
process.env.BASE_URL = 'http://analemma.test';
process.env.DEMO = 'true';

afterAll(() => rmSync(folder, { recursive: true, force: true }));
