/** Reads `a[b][0][c]=d`, the form encoding that the Stripe API speaks, into nested objects. */
export function readForm(body: string): Record<string, unknown> {
  const root: Record<string, unknown> = {};
  for (const [key, value] of new URLSearchParams(body)) {
    const parts = key.split(/\[|\]\[|\]/).filter((part) => part !== '');
    if (parts.some((part) => part === '__proto__' || part === 'constructor' || part === 'prototype'))
      continue;
    let place = root;
    parts.slice(0, -1).forEach((part) => {
      place[part] ??= {};
      place = place[part] as Record<string, unknown>;
    });
    place[parts[parts.length - 1] as string] = value;
  }
  return root;
}
