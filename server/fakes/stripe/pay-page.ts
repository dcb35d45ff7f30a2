import type { FakeSession } from './state';

const escape = (text: string): string => text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);

/** The stand-in's own plain payment page. It says what it is. */
export function payPage(
  session: FakeSession,
  options: { message?: string; authenticate?: boolean } = {},
): string {
  const digits =
    new Intl.NumberFormat('en', {
      style: 'currency',
      currency: session.currency.toUpperCase(),
    }).resolvedOptions().maximumFractionDigits ?? 2;
  const amount = new Intl.NumberFormat('en-GB', {
    style: 'currency',
    currency: session.currency.toUpperCase(),
  }).format(session.amount_total / 10 ** digits);
  const form = options.authenticate
    ? `<p>The bank of this card asks for a confirmation.</p><form method="post"><input type="hidden" name="confirm" value="yes"><button>Confirm the payment</button></form><form method="post"><input type="hidden" name="confirm" value="no"><button class="quiet">Do not confirm</button></form>`
    : `<form method="post"><label for="card">Card number</label><input id="card" name="card" inputmode="numeric" autocomplete="off" autofocus>
<div class="two"><div><label for="expiry">Expires</label><input id="expiry" name="expiry" value="12/34"></div><div><label for="cvc">CVC</label><input id="cvc" name="cvc" value="123"></div></div>
<button>Pay ${escape(amount)}</button></form>`;
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width,initial-scale=1"><title>Test payment</title><style>
body{font:16px/1.5 system-ui,sans-serif;margin:0;background:#f4f6f2;color:#13201b}main{max-width:420px;margin:6vh auto;background:#fcfdfb;padding:28px;border-top:2px solid #13201b;border-bottom:2px solid #13201b}
h1{font:500 26px Georgia,serif;margin:0 0 4px}label{display:block;font-weight:600;margin:14px 0 4px}input{box-sizing:border-box;width:100%;min-height:44px;padding:0 10px;font:inherit;border:1px solid #77847c;border-radius:3px}
.two{display:grid;grid-template-columns:1fr 1fr;gap:14px}button{margin-top:20px;min-height:44px;width:100%;font:600 16px system-ui;background:#0e4f5e;color:#fff;border:0;border-radius:3px}button.quiet{background:none;color:#13201b;border:1px solid #77847c}
.note{background:#f6eed6;padding:10px 12px;font-size:14px}.wrong{background:#f9e8e4;padding:10px 12px;font-weight:600;color:#a3241b}td{padding:2px 12px 2px 0;font-size:14px}a{color:#0e4f5e}:focus-visible{outline:2px solid #0e4f5e;outline-offset:2px}</style></head>
<body><main><p class="note">This is the local test payment page. No money moves and no card is charged.</p><h1>${escape(amount)}</h1><p>${escape(session.title)}</p>
${options.message ? `<p class="wrong" role="alert">${escape(options.message)}</p>` : ''}${form}
<p><a href="${escape(session.cancel_url)}">Back without paying</a></p>
<table><tr><td>4242 4242 4242 4242</td><td>is paid</td></tr><tr><td>4000 0000 0000 9995</td><td>has too little money</td></tr><tr><td>4000 0000 0000 0002</td><td>is declined</td></tr><tr><td>4000 0027 6000 3184</td><td>asks for a confirmation</td></tr></table>
</main></body></html>`;
}
