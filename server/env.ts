import path from 'node:path';
import { z } from 'zod';

const DEMO_SECRET = 'demo-session-secret-not-for-production';
const flag = z.enum(['true', 'false', '1', '0']).transform((value) => value === 'true' || value === '1');

const schema = z.object({
  NODE_ENV: z.enum(['development', 'production', 'test']).default('development'),
  PORT: z.coerce.number().int().min(0).max(65535).default(3000),
  /** Address to listen on; the loopback address unless a proxy on another host must reach it. */
  HOST: z.string().min(1).default('127.0.0.1'),
  DATABASE_FILE: z.string().min(1).default('data/analemma.sqlite'),
  UPLOADS_DIR: z.string().min(1).default('uploads'),
  BASE_URL: z.url().optional(),
  SESSION_SECRET: z.string().min(32, 'at least 32 characters').optional(),
  SMTP_URL: z.url().optional(),
  STRIPE_SECRET_KEY: z.string().min(8).optional(),
  STRIPE_WEBHOOK_SECRET: z.string().min(8).optional(),
  DEMO: flag.optional(),
  /** Names the local fakes that may run in production: `smtp`, `stripe` or both. */
  ALLOW_FAKES: z.string().default(''),
  INSTITUTE_NAME: z.string().min(1).default('Tarnholt Institute for Mathematics'),
  OFFICE_EMAIL: z.email().default('office@tarnholt.example.org'),
  LOG_LEVEL: z.enum(['trace', 'debug', 'info', 'warn', 'error', 'silent']).default('info'),
});

export type Env = z.infer<typeof schema> & { DEMO: boolean; BASE_URL: string; SESSION_SECRET: string };

/**
 * Reads the environment once. A wrong value, or a demo default in production, stops the start with one sentence
 * per variable; nothing is guessed silently.
 */
export function parseEnv(source: Record<string, string | undefined>): Env {
  const given = Object.fromEntries(Object.entries(source).filter(([, value]) => value !== ''));
  const result = schema.safeParse(given);
  if (!result.success) {
    throw new Error(
      `The environment is not right:\n${result.error.issues.map((i) => `  ${i.path.join('.')}: ${i.message}`).join('\n')}`,
    );
  }
  const value = result.data;
  const production = value.NODE_ENV === 'production';
  const demo = value.DEMO ?? !production;
  const problems = production ? productionProblems(value, demo) : [];
  if (problems.length > 0)
    throw new Error(`Not fit for production:\n${problems.map((p) => `  ${p}`).join('\n')}`);
  const host =
    value.HOST === '0.0.0.0' || value.HOST === '::'
      ? 'localhost'
      : value.HOST === '127.0.0.1'
        ? 'localhost'
        : value.HOST;
  return {
    ...value,
    DEMO: demo,
    DATABASE_FILE: path.resolve(value.DATABASE_FILE),
    UPLOADS_DIR: path.resolve(value.UPLOADS_DIR),
    BASE_URL: (value.BASE_URL ?? `http://${host}:${value.PORT}`).replace(/\/$/, ''),
    SESSION_SECRET: value.SESSION_SECRET ?? DEMO_SECRET,
  };
}

function productionProblems(value: z.infer<typeof schema>, demo: boolean): string[] {
  const fakes = new Set(value.ALLOW_FAKES.split(',').map((name) => name.trim()));
  const problems: string[] = [];
  if (!value.SESSION_SECRET) problems.push('SESSION_SECRET must be set.');
  if (!value.BASE_URL) problems.push('BASE_URL must be set to the address that people use.');
  if (demo) problems.push('DEMO accounts are not allowed in production.');
  if (!value.SMTP_URL && !fakes.has('smtp'))
    problems.push('SMTP_URL must be set (or ALLOW_FAKES must name smtp).');
  if (!(value.STRIPE_SECRET_KEY && value.STRIPE_WEBHOOK_SECRET) && !fakes.has('stripe')) {
    problems.push(
      'STRIPE_SECRET_KEY and STRIPE_WEBHOOK_SECRET must be set (or ALLOW_FAKES must name stripe).',
    );
  }
  return problems;
}

export const env: Env = parseEnv(process.env);
