import Stripe from 'stripe';
import { fromStripeAmount, stripeAmount } from '@shared/lib/money';
import { env } from '@server/env';

/** Card payments in our own words; the provider's words stay in this file. */
export interface CheckoutSession {
  id: string;
  url: string | null;
  status: string | null;
  paymentStatus: string;
  /** In our minor units. */
  amountMinor: number;
  currency: string;
  orderId: string | null;
  /** Words of the last failed try, when there was one. */
  failure: string | null;
}

export interface CardNotice {
  id: string;
  type: string;
  /** Created at, by the provider's clock. */
  createdAt: Date;
  sessionId: string | null;
  orderId: string | null;
}

/** Where the local stand-in listens; set when it starts. Without it the real service is used. */
interface StandIn {
  host: string;
  port: number;
  secretKey: string;
  webhookSecret: string;
}
let standIn: StandIn | undefined;
export function useLocalStripe(address: StandIn | undefined): void {
  standIn = address;
  client = undefined;
}

let client: Stripe | undefined;
function stripe(): Stripe {
  if (client) return client;
  if (standIn) {
    client = new Stripe(standIn.secretKey, {
      host: standIn.host,
      port: standIn.port,
      protocol: 'http',
      maxNetworkRetries: 2,
      telemetry: false,
    });
  } else if (env.STRIPE_SECRET_KEY) {
    client = new Stripe(env.STRIPE_SECRET_KEY, { maxNetworkRetries: 2, telemetry: false });
  } else {
    throw new Error('card payments are not set up');
  }
  return client;
}
const webhookSecret = (): string => (standIn ? standIn.webhookSecret : (env.STRIPE_WEBHOOK_SECRET ?? ''));

export interface CheckoutInput {
  orderId: string;
  orderNumber: string;
  title: string;
  amountMinor: number;
  currency: string;
  email: string;
  successUrl: string;
  cancelUrl: string;
  /** Not later than this, and at least 30 minutes away. */
  expiresAt: Date;
  idempotencyKey: string;
}

export async function createCheckout(input: CheckoutInput): Promise<CheckoutSession> {
  const session = await stripe().checkout.sessions.create(
    {
      mode: 'payment',
      client_reference_id: input.orderId,
      metadata: { order: input.orderId },
      customer_email: input.email,
      success_url: input.successUrl,
      cancel_url: input.cancelUrl,
      expires_at: Math.floor(input.expiresAt.getTime() / 1000),
      payment_intent_data: { metadata: { order: input.orderId } },
      line_items: [
        {
          quantity: 1,
          price_data: {
            currency: input.currency.toLowerCase(),
            unit_amount: stripeAmount(input.amountMinor, input.currency),
            product_data: { name: `${input.title}, order ${input.orderNumber}` },
          },
        },
      ],
    },
    { idempotencyKey: input.idempotencyKey },
  );
  return present(session);
}

/** The session as it is now. */
export async function readCheckout(id: string): Promise<CheckoutSession> {
  return present(await stripe().checkout.sessions.retrieve(id, { expand: ['payment_intent'] }));
}

/** So that a card can't be charged for an order that is closed. Only an open session can be expired; others stay. */
export async function expireCheckout(id: string): Promise<void> {
  await stripe()
    .checkout.sessions.expire(id)
    .catch((error: unknown) => {
      if (!(error instanceof Stripe.errors.StripeInvalidRequestError)) throw error;
    });
}

function present(session: Stripe.Checkout.Session): CheckoutSession {
  const currency = (session.currency ?? '').toUpperCase();
  const intent = typeof session.payment_intent === 'object' ? session.payment_intent : null;
  return {
    id: session.id,
    url: session.url,
    status: session.status,
    paymentStatus: session.payment_status,
    amountMinor: fromStripeAmount(session.amount_total ?? 0, currency),
    currency,
    orderId: session.metadata?.order ?? session.client_reference_id ?? null,
    failure: intent?.last_payment_error?.message ?? null,
  };
}

/** How far the provider's clock may be from ours, either way, in seconds. */
const TOLERANCE = 300;

/**
 * Checks the signature of a webhook (HMAC-SHA256 over time and raw body) and that it is not older than 300 s. The
 * library accepts times in the future; here one more than 300 s ahead is refused, too.
 * @throws Error when it does not come from the provider.
 */
export function readNotice(rawBody: Buffer, signature: string, now: Date): CardNotice {
  const event = Stripe.webhooks.constructEvent(
    rawBody,
    signature,
    webhookSecret(),
    TOLERANCE,
    undefined,
    now.getTime(),
  );
  const stamped = Number(/(?:^|,)t=(\d+)/.exec(signature)?.[1] ?? 0);
  if (stamped - now.getTime() / 1000 > TOLERANCE) throw new Error('the signature is from the future');
  const object = event.data.object as {
    id?: string;
    object?: string;
    metadata?: Record<string, string> | null;
  };
  return {
    id: event.id,
    type: event.type,
    createdAt: new Date(event.created * 1000),
    sessionId: object.object === 'checkout.session' ? (object.id ?? null) : null,
    orderId: object.metadata?.order ?? null,
  };
}
