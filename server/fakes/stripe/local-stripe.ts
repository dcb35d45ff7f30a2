import { randomBytes } from 'node:crypto';
import type { AddressInfo } from 'node:net';
import path from 'node:path';
import express, { type Request, type Response } from 'express';
import Stripe from 'stripe';
import { env } from '@server/env';
import { useLocalStripe } from '@server/features/finance/finance.gateway';
import { outcomeOf } from './cards';
import { readForm } from './form';
import { payPage } from './pay-page';
import { FakeState, newFakeId, seconds, type FakeEvent, type FakeIntent, type FakeSession } from './state';

export interface LocalStripe {
  url: string;
  port: number;
  state: FakeState;
  /** Secret with which the notices are signed. */
  webhookSecret: string;
  stop(): Promise<void>;
}

interface Options {
  /** Port of the application that gets the notices. */
  appPort: number;
  port?: number;
  /** Keep nothing on disk (tests). */
  forget?: boolean;
}

/** Seconds after which an unanswered notice is sent again. */
const RETRIES = [1, 3, 10, 30, 120];

/**
 * A local stand-in for the part of the Stripe API that is used here: Checkout Sessions, Payment Intents, Refunds,
 * Events, idempotency keys, lists with pages, errors with the documented codes, signed notices with retries.
 */
export async function startLocalStripe({
  appPort,
  port = env.PORT === 0 ? 0 : env.PORT + 1,
  forget = false,
}: Options): Promise<LocalStripe> {
  if (env.NODE_ENV === 'production' && !env.ALLOW_FAKES.includes('stripe'))
    throw new Error('the local card service does not run in production unless it is named');
  const state = new FakeState(
    forget ? null : path.join(path.dirname(env.DATABASE_FILE), 'local-stripe.json'),
  );
  const secretKey = `sk_test_${randomBytes(12).toString('hex')}`;
  const webhookSecret = `whsec_${randomBytes(16).toString('hex')}`;
  const timers = new Set<NodeJS.Timeout>();
  const deliver = (event: FakeEvent, attempt = 0): void => {
    const payload = JSON.stringify(event);
    const signature = Stripe.webhooks.generateTestHeaderString({ payload, secret: webhookSecret });
    fetch(`http://127.0.0.1:${appPort}/api/webhooks/stripe`, {
      method: 'POST',
      body: payload,
      headers: { 'Content-Type': 'application/json', 'Stripe-Signature': signature },
    })
      .then((response) => (response.ok ? undefined : Promise.reject(new Error(String(response.status)))))
      .catch(() => {
        const wait = RETRIES[attempt];
        if (wait === undefined) return;
        const timer = setTimeout(() => {
          timers.delete(timer);
          deliver(event, attempt + 1);
        }, wait * 1000);
        timers.add(timer);
      });
  };
  const emit = (type: string, object: object): void => {
    const event: FakeEvent = {
      id: newFakeId('evt'),
      object: 'event',
      type,
      created: seconds(),
      livemode: false,
      data: { object: structuredClone(object) },
    };
    state.all.events.unshift(event);
    state.save();
    deliver(event);
  };
  const app = express();
  app.disable('x-powered-by');
  app.use(express.text({ type: 'application/x-www-form-urlencoded', limit: '200kb' }));
  const base = (): string => `http://localhost:${(server.address() as AddressInfo).port}`;
  payRoutes(app, state, emit);
  apiRoutes(app, state, emit, base, secretKey);
  const server = app.listen(port, '127.0.0.1');
  await new Promise<void>((resolve, reject) => server.once('listening', resolve).once('error', reject));
  const sweep = setInterval(
    () => state.expireOld().forEach((session) => emit('checkout.session.expired', session)),
    10_000,
  );
  const listening = (server.address() as AddressInfo).port;
  useLocalStripe({ host: '127.0.0.1', port: listening, secretKey, webhookSecret });
  return {
    url: base(),
    port: listening,
    state,
    webhookSecret,
    stop: async () => {
      clearInterval(sweep);
      for (const timer of timers) clearTimeout(timer);
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
    },
  };
}

type Emit = (type: string, object: object) => void;

function payRoutes(app: express.Express, state: FakeState, emit: Emit): void {
  const find = (req: Request, res: Response): FakeSession | undefined => {
    const session = state.all.sessions[String(req.params.id)];
    if (session?.status === 'complete') res.redirect(303, session.success_url);
    else if (session?.status !== 'open')
      res.status(410).type('html').send('<p>This payment page is closed.</p>');
    return session?.status === 'open' ? session : undefined;
  };
  app.get('/pay/:id', (req, res) => {
    const session = find(req, res);
    if (session) res.type('html').send(payPage(session));
  });
  app.post('/pay/:id', (req, res) => {
    const session = find(req, res);
    if (!session) return;
    const form = readForm(String(req.body));
    const intent = state.all.intents[session.payment_intent as string] as FakeIntent;
    const outcome =
      form.confirm === 'yes'
        ? { kind: 'paid' as const }
        : form.confirm === 'no'
          ? outcomeOf('4000000000000002')
          : outcomeOf(String(form.card ?? ''));
    if (outcome.kind === 'authenticate')
      return void res.type('html').send(payPage(session, { authenticate: true }));
    if (outcome.kind === 'declined') {
      intent.last_payment_error = {
        type: 'card_error',
        code: outcome.code,
        decline_code: outcome.declineCode,
        message: outcome.message,
      };
      emit('payment_intent.payment_failed', intent);
      return void res
        .status(402)
        .type('html')
        .send(payPage(session, { message: outcome.message }));
    }
    Object.assign(intent, { status: 'succeeded', amount_received: intent.amount, last_payment_error: null });
    Object.assign(session, { status: 'complete', payment_status: 'paid', url: null });
    emit('payment_intent.succeeded', intent);
    emit('checkout.session.completed', session);
    res.redirect(303, session.success_url);
  });
}

const fault = (res: Response, status: number, code: string, message: string, param?: string): void =>
  void res
    .status(status)
    .json({
      error: {
        type:
          status === 401
            ? 'authentication_error'
            : status === 400 && code === 'idempotency_key_in_use'
              ? 'idempotency_error'
              : 'invalid_request_error',
        code,
        message,
        param,
      },
    });

function apiRoutes(
  app: express.Express,
  state: FakeState,
  emit: Emit,
  base: () => string,
  secretKey: string,
): void {
  app.use('/v1', (req, res, next) => {
    if (req.get('authorization') !== `Bearer ${secretKey}`)
      return fault(res, 401, 'api_key_invalid', 'Invalid API Key provided.');
    const key = req.get('idempotency-key');
    if (req.method !== 'POST' || !key) return next();
    const known = state.all.answers[key];
    const request = `${req.path} ${String(req.body)}`;
    if (known && known.request !== request)
      return fault(
        res,
        400,
        'idempotency_key_in_use',
        'Keys for idempotent requests can only be used with the same parameters they were first used with.',
      );
    if (known) return void res.status(known.status).json(known.body);
    const json = res.json.bind(res);
    res.json = (body: object) => {
      state.all.answers[key] = { request, status: res.statusCode, body };
      return json(body);
    };
    next();
  });
  app.post('/v1/checkout/sessions', (req, res) =>
    createSession(state, base, readForm(String(req.body)), res),
  );
  app.get('/v1/checkout/sessions', (req, res) =>
    list(res, '/v1/checkout/sessions', Object.values(state.all.sessions).reverse(), req.query),
  );
  app.get('/v1/checkout/sessions/:id', (req, res) => {
    state.expireOld().forEach((session) => emit('checkout.session.expired', session));
    const session = state.all.sessions[req.params.id];
    if (!session)
      return fault(res, 404, 'resource_missing', `No such checkout.session: '${req.params.id}'`, 'session');
    const expand = JSON.stringify(req.query).includes('payment_intent');
    res.json(
      expand && session.payment_intent
        ? { ...session, payment_intent: state.all.intents[session.payment_intent] }
        : session,
    );
  });
  app.post('/v1/checkout/sessions/:id/expire', (req, res) => {
    const session = state.all.sessions[req.params.id];
    if (!session)
      return fault(res, 404, 'resource_missing', `No such checkout.session: '${req.params.id}'`, 'session');
    if (session.status !== 'open')
      return fault(
        res,
        400,
        'checkout_session_not_open',
        'Only Checkout Sessions with a status in ["open"] can be expired.',
      );
    Object.assign(session, { status: 'expired', url: null });
    emit('checkout.session.expired', session);
    res.json(session);
  });
  app.get('/v1/payment_intents/:id', (req, res) => {
    const intent = state.all.intents[req.params.id];
    if (!intent)
      return fault(res, 404, 'resource_missing', `No such payment_intent: '${req.params.id}'`, 'intent');
    res.json(intent);
  });
  app.post('/v1/refunds', (req, res) => createRefund(state, emit, readForm(String(req.body)), res));
  app.get('/v1/refunds', (req, res) =>
    list(res, '/v1/refunds', Object.values(state.all.refunds).reverse(), req.query),
  );
  app.get('/v1/events', (req, res) => list(res, '/v1/events', state.all.events, req.query));
  app.use('/v1', (req, res) =>
    fault(res, 404, 'url_invalid', `Unrecognized request URL (${req.method}: ${req.path}).`),
  );
}

function createSession(
  state: FakeState,
  base: () => string,
  form: Record<string, unknown>,
  res: Response,
): void {
  const item = (
    form.line_items as
      | Record<
          string,
          {
            quantity?: string;
            price_data?: { unit_amount?: string; currency?: string; product_data?: { name?: string } };
          }
        >
      | undefined
  )?.['0'];
  const amount = Number(item?.price_data?.unit_amount) * Number(item?.quantity ?? 1);
  if (!Number.isSafeInteger(amount) || amount < 1)
    return fault(
      res,
      400,
      'parameter_invalid_integer',
      'Invalid integer',
      'line_items[0][price_data][unit_amount]',
    );
  if (!form.success_url)
    return fault(res, 400, 'parameter_missing', 'Missing required param: success_url.', 'success_url');
  const created = seconds();
  const expires = Number(form.expires_at ?? created + 86_400);
  if (expires < created + 1800 || expires > created + 86_400)
    return fault(
      res,
      400,
      'parameter_invalid_integer',
      'The `expires_at` timestamp must be between 30 minutes and 24 hours from now.',
      'expires_at',
    );
  const metadata = (form.metadata ?? {}) as Record<string, string>;
  const currency = item?.price_data?.currency ?? 'eur';
  const intent: FakeIntent = {
    id: newFakeId('pi'),
    object: 'payment_intent',
    status: 'requires_payment_method',
    amount,
    amount_received: 0,
    currency,
    metadata,
    last_payment_error: null,
    created,
    livemode: false,
  };
  const id = newFakeId('cs');
  state.all.intents[intent.id] = intent;
  state.all.sessions[id] = {
    id,
    object: 'checkout.session',
    status: 'open',
    payment_status: 'unpaid',
    amount_total: amount,
    currency,
    metadata,
    payment_intent: intent.id,
    created,
    expires_at: expires,
    mode: 'payment',
    livemode: false,
    client_reference_id: (form.client_reference_id as string | undefined) ?? null,
    customer_email: (form.customer_email as string | undefined) ?? null,
    success_url: String(form.success_url),
    cancel_url: String(form.cancel_url ?? form.success_url),
    url: `${base()}/pay/${id}`,
    title: item?.price_data?.product_data?.name ?? '',
  };
  state.save();
  res.json(state.all.sessions[id] as object);
}

function createRefund(state: FakeState, emit: Emit, form: Record<string, unknown>, res: Response): void {
  const intent = state.all.intents[String(form.payment_intent)];
  if (!intent || intent.status !== 'succeeded')
    return fault(res, 400, 'resource_missing', 'There is nothing to refund.', 'payment_intent');
  const before = Object.values(state.all.refunds)
    .filter((refund) => refund.payment_intent === intent.id)
    .reduce((sum, refund) => sum + refund.amount, 0);
  const amount = form.amount === undefined ? intent.amount - before : Number(form.amount);
  if (amount + before > intent.amount)
    return fault(
      res,
      400,
      'amount_too_large',
      'Refund amount is greater than unrefunded amount on charge.',
      'amount',
    );
  const refund = {
    id: newFakeId('re'),
    object: 'refund' as const,
    amount,
    currency: intent.currency,
    payment_intent: intent.id,
    status: 'succeeded' as const,
    created: seconds(),
    metadata: (form.metadata ?? {}) as Record<string, string>,
  };
  state.all.refunds[refund.id] = refund;
  emit('refund.created', refund);
  res.json(refund);
}

/** A list of the API: `limit` up to 100, `starting_after`, `has_more`. */
function list(res: Response, url: string, items: { id: string }[], query: Request['query']): void {
  const limit = Math.min(100, Math.max(1, Number(query.limit ?? 10)));
  const from = query.starting_after ? items.findIndex((item) => item.id === query.starting_after) + 1 : 0;
  res.json({
    object: 'list',
    url,
    has_more: items.length > from + limit,
    data: items.slice(from, from + limit),
  });
}
