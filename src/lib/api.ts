import { fillPath, type Endpoint } from '@shared/http/endpoint';
import { Problem, type ProblemBody } from '@shared/http/problem';

export interface CallOptions<P, Q, B> {
  params?: P;
  query?: Partial<Q>;
  body?: B;
  /** Sent as If-Match. */
  version?: number;
  file?: File;
  /** 0..1, while an upload travels. */
  onProgress?: (share: number) => void;
  signal?: AbortSignal;
}

let csrf: string | undefined;

/** The token comes with every answer that describes the session. */
export function rememberCsrf(token: string): void {
  csrf = token;
}

async function token(): Promise<string> {
  if (!csrf) {
    const response = await fetch('/api/session', { credentials: 'same-origin' });
    csrf = ((await response.json()) as { csrfToken: string }).csrfToken;
  }
  return csrf;
}

/**
 * Carries out one operation of the contract.
 * @throws Problem with the server's words; status 0 when the server could not be reached.
 */
export async function call<P, Q, B, R>(
  endpoint: Endpoint<P, Q, B, R>,
  options: CallOptions<P, Q, B> = {},
): Promise<R> {
  const answer = await once(endpoint, options);
  if (answer.status === 403 && answer.problem?.code === 'csrf') {
    csrf = undefined; // the cookie was renewed in another tab: take the new token and try once more
    return result(await once(endpoint, options));
  }
  return result(answer);
}

interface RawAnswer {
  status: number;
  body: unknown;
  problem?: ProblemBody;
}

function result<R>(answer: RawAnswer): R {
  if (answer.status >= 200 && answer.status < 300) {
    const fresh = (answer.body as { csrfToken?: unknown } | undefined)?.csrfToken;
    if (typeof fresh === 'string') csrf = fresh;
    return answer.body as R;
  }
  const p = answer.problem;
  throw new Problem(
    answer.status,
    p?.code ?? 'unreachable',
    p?.detail ??
      'The server could not be reached. What you typed is still here; check the network and try again.',
    p?.fields,
    { ...p?.facts, requestId: p?.requestId },
  );
}

async function once<P, Q, B, R>(
  endpoint: Endpoint<P, Q, B, R>,
  options: CallOptions<P, Q, B>,
): Promise<RawAnswer> {
  const url = address(endpoint, options);
  const headers: Record<string, string> = { Accept: 'application/json' };
  if (options.version !== undefined) headers['If-Match'] = `"v${options.version}"`;
  if (endpoint.method !== 'GET') headers['X-CSRF-Token'] = await token().catch(() => '');
  if (options.file) return sendFile(endpoint, url, headers, options);
  const init: RequestInit = {
    method: endpoint.method,
    headers,
    credentials: 'same-origin',
    signal: options.signal,
  };
  if (endpoint.method !== 'GET' && (options.body !== undefined || endpoint.body)) {
    headers['Content-Type'] = 'application/json';
    init.body = JSON.stringify(options.body ?? {});
  }
  try {
    const response = await fetch(url, init);
    return read(response.status, response.headers.get('content-type') ?? '', await response.text());
  } catch (error) {
    if ((error as Error).name === 'AbortError') throw error;
    return { status: 0, body: undefined };
  }
}

function address<P, Q, B>(endpoint: Endpoint<P, Q, B, unknown>, options: CallOptions<P, Q, B>): string {
  const query = new URLSearchParams();
  for (const [key, value] of Object.entries(options.query ?? {})) {
    if (value !== undefined && value !== null && value !== '') query.set(key, String(value));
  }
  const text = query.toString();
  return (
    fillPath(endpoint.path, (options.params ?? {}) as Record<string, unknown>) + (text ? `?${text}` : '')
  );
}

function read(status: number, type: string, text: string): RawAnswer {
  if (!type.includes('json')) return { status, body: text || undefined };
  try {
    const body: unknown = JSON.parse(text);
    return type.includes('problem')
      ? { status, body: undefined, problem: body as ProblemBody }
      : { status, body };
  } catch {
    return { status: status >= 400 ? status : 0, body: undefined };
  }
}

/** XMLHttpRequest, because fetch does not tell how much of an upload has travelled. */
function sendFile<P, Q, B>(
  endpoint: Endpoint<P, Q, B, unknown>,
  url: string,
  headers: Record<string, string>,
  options: CallOptions<P, Q, B>,
): Promise<RawAnswer> {
  const form = new FormData();
  for (const [key, value] of Object.entries((options.body ?? {}) as Record<string, unknown>)) {
    if (value !== undefined && value !== null) form.set(key, String(value));
  }
  form.set(endpoint.upload?.field ?? 'file', options.file as File);
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    request.open(endpoint.method, url);
    for (const [name, value] of Object.entries(headers)) request.setRequestHeader(name, value);
    request.upload.onprogress = (event) =>
      event.lengthComputable && options.onProgress?.(event.loaded / event.total);
    request.onload = () =>
      resolve(read(request.status, request.getResponseHeader('content-type') ?? '', request.responseText));
    request.onerror = () => resolve({ status: 0, body: undefined });
    request.onabort = () => reject(new DOMException('stopped', 'AbortError'));
    options.signal?.addEventListener('abort', () => request.abort());
    request.send(form);
  });
}

/** The address of an operation that answers with a file, for links. */
export function fileAddress<P, Q, B, R>(
  endpoint: Endpoint<P, Q, B, R>,
  params: P,
  query?: Partial<Q>,
): string {
  return address(endpoint as Endpoint<P, Q, B, unknown>, { params, query });
}
