import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';

export interface FakeSession {
  id: string;
  object: 'checkout.session';
  status: 'open' | 'complete' | 'expired';
  payment_status: 'unpaid' | 'paid';
  amount_total: number;
  currency: string;
  client_reference_id: string | null;
  customer_email: string | null;
  metadata: Record<string, string>;
  payment_intent: string | null;
  success_url: string;
  cancel_url: string;
  expires_at: number;
  created: number;
  mode: 'payment';
  livemode: false;
  url: string | null;
  /** Ours, not shown by the API: what stands on the payment page. */
  title: string;
}

export interface FakeIntent {
  id: string;
  object: 'payment_intent';
  status: 'requires_payment_method' | 'requires_action' | 'succeeded' | 'canceled';
  amount: number;
  amount_received: number;
  currency: string;
  metadata: Record<string, string>;
  last_payment_error: { type: 'card_error'; code: string; decline_code: string; message: string } | null;
  created: number;
  livemode: false;
}

export interface FakeEvent {
  id: string;
  object: 'event';
  type: string;
  created: number;
  livemode: false;
  data: { object: object };
}

export interface FakeRefund {
  id: string;
  object: 'refund';
  amount: number;
  currency: string;
  payment_intent: string;
  status: 'succeeded';
  created: number;
  metadata: Record<string, string>;
}

interface State {
  sessions: Record<string, FakeSession>;
  intents: Record<string, FakeIntent>;
  refunds: Record<string, FakeRefund>;
  events: FakeEvent[];
  /** Idempotency key -> request body and answer. */
  answers: Record<string, { request: string; status: number; body: object }>;
}

export const newFakeId = (prefix: string): string => `${prefix}_test_${randomBytes(12).toString('hex')}`;
export const seconds = (): number => Math.floor(Date.now() / 1000);

/** All that the stand-in knows; kept in a file when one is named, so that a restart forgets nothing. */
export class FakeState {
  readonly all: State;

  constructor(private readonly file: string | null) {
    const empty: State = { sessions: {}, intents: {}, refunds: {}, events: [], answers: {} };
    this.all =
      file && existsSync(file) ? { ...empty, ...(JSON.parse(readFileSync(file, 'utf8')) as State) } : empty;
  }

  save(): void {
    if (!this.file) return;
    mkdirSync(path.dirname(this.file), { recursive: true });
    writeFileSync(this.file, JSON.stringify(this.all));
  }

  /** Closes what has run out of time, as the real service does. */
  expireOld(): FakeSession[] {
    const old = Object.values(this.all.sessions).filter(
      (session) => session.status === 'open' && session.expires_at <= seconds(),
    );
    for (const session of old) Object.assign(session, { status: 'expired', url: null });
    return old;
  }
}
