import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';

/** Starts web server, worker and (in the demo) the local fakes; stops them politely on SIGTERM and SIGINT. */
async function main(): Promise<void> {
  const { env } = await import('./env');
  const dev = process.argv.includes('--dev');
  const { startServices } = await import('./services');
  const services = await startServices();
  const { buildApp } = await import('./app');
  const { clientDir, ensureClient, viteClient } = await import('./client');
  const vite = dev ? await viteClient() : undefined;
  if (!vite) await ensureClient();
  const app = buildApp({ clientDir: vite ? null : clientDir, devClient: vite?.middleware });
  const server = await new Promise<Server>((resolve, reject) => {
    const listening = app.listen(env.PORT, env.HOST, (error?: Error) =>
      error ? reject(error) : resolve(listening),
    );
  });
  vite?.attach(server);
  await services.afterListening((server.address() as AddressInfo).port);
  announceAddress(env.BASE_URL, services.notes);
  if (env.DEMO) await printDemoAccounts();
  stopPolitely(server, services.stop);
}

function announceAddress(address: string, notes: string[]): void {
  process.stdout.write(`\nAnalemma answers on ${address}\n${notes.map((note) => `  ${note}\n`).join('')}`);
}

async function printDemoAccounts(): Promise<void> {
  const { demoAccounts } = await import('../seeds/demo-accounts');
  const lines = demoAccounts.map((a) => `  ${a.role.padEnd(14)} ${a.email.padEnd(34)} ${a.password}`);
  process.stdout.write(`\nDemo accounts (invented people):\n${lines.join('\n')}\n\n`);
}

function stopPolitely(server: Server, stopServices: () => Promise<void>): void {
  let stopping = false;
  const stop = async (): Promise<void> => {
    if (stopping) process.exit(1);
    stopping = true;
    setTimeout(() => process.exit(1), 10_000).unref();
    server.closeIdleConnections();
    await new Promise((resolve) => server.close(resolve));
    await stopServices();
    process.exit(0);
  };
  process.on('SIGTERM', () => void stop());
  process.on('SIGINT', () => void stop());
}

main().catch((error: unknown) => {
  process.stderr.write(`Analemma did not start. ${(error as Error).message}\n`);
  if (process.env.LOG_LEVEL === 'debug') process.stderr.write(`${(error as Error).stack}\n`);
  process.exit(1);
});
