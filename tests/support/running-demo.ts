import { spawn, type ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import os from 'node:os';
import path from 'node:path';

export interface RunningDemo {
  url: string;
  /** What the program printed so far. */
  output(): string;
  stop(): Promise<void>;
}

/** Two neighbouring ports that are free now: the card service's stand-in listens one above. */
async function freePorts(): Promise<number> {
  for (let attempt = 0; attempt < 30; attempt++) {
    const port = 20_000 + Math.floor(Math.random() * 20_000);
    if ((await isFree(port)) && (await isFree(port + 1))) return port;
  }
  throw new Error('no free port');
}

const isFree = (port: number): Promise<boolean> =>
  new Promise((resolve) => {
    const probe = createServer()
      .once('error', () => resolve(false))
      .once('listening', () => probe.close(() => resolve(true)))
      .listen(port, '127.0.0.1');
  });

/** `npm start` as a child process, in a folder of its own: the demo is filled, the stand-ins run. */
export async function startRunningDemo(): Promise<RunningDemo> {
  const folder = mkdtempSync(path.join(os.tmpdir(), 'analemma-demo-'));
  const port = await freePorts();
  const env = {
    ...process.env,
    NODE_ENV: 'development',
    PORT: String(port),
    DATABASE_FILE: path.join(folder, 'demo.sqlite'),
    UPLOADS_DIR: path.join(folder, 'uploads'),
    BASE_URL: `http://localhost:${port}`,
    DEMO: 'true',
    LOG_LEVEL: 'warn',
  };
  const child: ChildProcess = spawn(process.execPath, ['--import', 'tsx', 'server/main.ts'], {
    env,
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let output = '';
  child.stdout?.on('data', (chunk: Buffer) => (output += chunk.toString()));
  child.stderr?.on('data', (chunk: Buffer) => (output += chunk.toString()));
  const url = `http://localhost:${port}`;
  await answers(`${url}/api/health`, child, () => output);
  return {
    url,
    output: () => output,
    stop: async () => {
      const gone = new Promise((resolve) => child.once('exit', resolve));
      child.kill('SIGTERM');
      await gone;
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

async function answers(address: string, child: ChildProcess, output: () => string): Promise<void> {
  for (let i = 0; i < 600; i++) {
    if (child.exitCode !== null) throw new Error(`the program stopped: ${output()}`);
    const response = await fetch(address).catch(() => null);
    if (response?.ok && output().includes('Demo accounts')) return;
    await new Promise((resolve) => setTimeout(resolve, 200));
  }
  throw new Error(`the program does not answer: ${output()}`);
}
