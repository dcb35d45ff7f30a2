import { writersDone } from './db/transaction';
import { closeDatabase } from './db/connection';
import { migrate } from './db/migrate';
import './db/models';
import { env } from './env';
import { log } from './http/request-log';
import { periodic } from './jobs/periodic';
import { reactions } from './jobs/registry';
import { scheduler } from './jobs/schedule';
import { runDueJobs, startWorker } from './jobs/worker';
import { acceptReplies } from './features/messages/messages-test-mail.service';
import { dispatchMail, recoverInterrupted } from './mail/dispatch';

export interface Services {
  /** Sentences for the start page on the terminal. */
  notes: string[];
  /** Starts what needs the web server's port. */
  afterListening(port: number): Promise<void>;
  stop(): Promise<void>;
}

/** Migrates, starts the fakes that stand in for missing services, fills an empty demo, starts the worker. */
export async function startServices(): Promise<Services> {
  const ran = await migrate();
  if (ran.length > 0) log.info({ migrations: ran.length }, 'database brought up to date');
  const notes: string[] = [];
  const stops: (() => Promise<void>)[] = [];
  await startSmtpFake(notes, stops);
  if (env.DEMO) await fillEmptyDemo(notes);
  await recoverInterrupted();
  const clock = scheduler(periodic);
  const mailWorker = startWorker(() => dispatchMail());
  const worker = startWorker(async () => {
    await runDueJobs(reactions);
    await clock(new Date());
  });
  return {
    notes,
    afterListening: (port) => startStripeFake(port, notes, stops),
    stop: async () => {
      await Promise.all([worker.stop(), mailWorker.stop()]);
      for (const stop of stops.reverse()) await stop();
      await writersDone();
      await closeDatabase();
    },
  };
}

async function startSmtpFake(notes: string[], stops: (() => Promise<void>)[]): Promise<void> {
  if (env.SMTP_URL) return;
  const { startLocalMailbox } = await import('./fakes/smtp/local-mailbox');
  const fake = await startLocalMailbox();
  acceptReplies();
  stops.push(fake.stop);
  notes.push(`Mail goes nowhere: a local test mailbox takes it (${env.BASE_URL}/office/test-mail).`);
}

async function startStripeFake(port: number, notes: string[], stops: (() => Promise<void>)[]): Promise<void> {
  if (env.STRIPE_SECRET_KEY && env.STRIPE_WEBHOOK_SECRET) return;
  const { startLocalStripe } = await import('./fakes/stripe/local-stripe');
  const fake = await startLocalStripe({ appPort: port });
  stops.push(fake.stop);
  notes.push(`Cards are not charged: a local stand-in takes them (${fake.url}).`);
}

async function fillEmptyDemo(notes: string[]): Promise<void> {
  const { AccountRow } = await import('./features/accounts/accounts.model');
  if ((await AccountRow.count()) > 0) return;
  const started = Date.now();
  process.stdout.write('Filling the empty database with the demo (once) ...\n');
  const { seedDemo } = await import('../seeds/run');
  await seedDemo({ scale: 1 });
  notes.push(`The demo was filled in ${Math.round((Date.now() - started) / 1000)} s.`);
}
