import { randomBytes, timingSafeEqual } from 'node:crypto';
import type { IncomingHttpHeaders } from 'node:http';
import { ApiError, noSuch } from './errors.ts';
import { errorOf, type Fault, type Faults } from './faults.ts';
import { Params, fingerprint, parseForm, type Tree } from './params.ts';
import { expand, present } from './reading.ts';
import { routeFor } from './routes.ts';
import { API_VERSION, type World } from './world.ts';

/** An answer ready to be sent; `dead` means that the line goes dead instead. */
export interface Answer {
  readonly status: number;
  readonly body: string;
  readonly headers: Record<string, string>;
  readonly dead?: true;
}

export interface ApiRequest {
  readonly method: string;
  readonly path: string;
  readonly query: string;
  readonly body: string;
  readonly headers: IncomingHttpHeaders;
}

const wait = (ms: number): Promise<void> => new Promise((done) => setTimeout(done, ms));

/** The key a request came with, as a bearer token or as the user name of basic authentication. */
function keyOf(headers: IncomingHttpHeaders): string | null {
  const [scheme, value] = (headers.authorization ?? '').split(' ');
  if (value === undefined) return null;
  if (scheme?.toLowerCase() === 'bearer') return value;
  return scheme?.toLowerCase() === 'basic' ? (Buffer.from(value, 'base64').toString('utf8').split(':')[0] ?? null) : null;
}

function checkKey(headers: IncomingHttpHeaders, key: string): void {
  const given = keyOf(headers);
  if (given === null || given === '') {
    throw new ApiError(401, { type: 'invalid_request_error', message: 'You did not provide an API key. You need to provide your API key in the Authorization header, using Bearer auth.' });
  }
  const [a, b] = [Buffer.from(given), Buffer.from(key)];
  if (a.length !== b.length || !timingSafeEqual(a, b)) {
    throw new ApiError(401, { type: 'invalid_request_error', message: `Invalid API Key provided: ${given.slice(0, 8)}${'*'.repeat(8)}${given.slice(-4)}` });
  }
}

/** The API: authentication, idempotency, faults, and one change of the books per request. */
export class Api {
  private readonly inProgress = new Set<string>();

  constructor(
    private readonly world: World,
    private readonly faults: Faults,
    private readonly key: string,
  ) {}

  async answer(request: ApiRequest): Promise<Answer> {
    const requestId = `req_${randomBytes(7).toString('hex')}`;
    const idempotencyKey = request.method === 'POST' ? header(request.headers['idempotency-key']) : null;
    const headers: Record<string, string> = {
      'Content-Type': 'application/json',
      'Request-Id': requestId,
      'Stripe-Version': API_VERSION,
      'Cache-Control': 'no-cache, no-store',
      ...(idempotencyKey === null ? {} : { 'Idempotency-Key': idempotencyKey }),
    };
    try {
      checkKey(request.headers, this.key);
      const owner = header(request.headers['stripe-account']) ?? '';
      if (owner !== '' && this.world.store.get('account', owner) === undefined) {
        throw new ApiError(403, { type: 'invalid_request_error', code: 'account_invalid', message: `The provided key does not have access to account '${owner}' (or that account does not exist).` });
      }
      const parameters = parseForm(request.method === 'GET' || request.method === 'DELETE' ? request.query : request.body);
      const slot = idempotencyKey === null ? null : `${owner} ${idempotencyKey}`;
      const print = `${request.method} ${request.path} ${fingerprint(parameters)}`;
      const known = slot === null ? null : this.replay(slot, print, idempotencyKey ?? '');
      const fault = this.faults.take(request.method, request.path);
      if (fault?.effect === 'drop before' || (known !== null && fault?.effect === 'drop')) return { status: 0, body: '', headers: {}, dead: true };
      if (known !== null) return { ...known, headers: { ...headers, 'Request-Id': known.headers['Request-Id'] ?? requestId, 'Idempotent-Replayed': 'true' } };
      if (slot !== null) this.inProgress.add(slot);
      try {
        return await this.perform(request, { owner, parameters, slot, print, requestId, idempotencyKey, headers, fault });
      } finally {
        if (slot !== null) this.inProgress.delete(slot);
      }
    } catch (error) {
      return this.refusal(error, requestId, headers);
    }
  }

  /** The first answer under a key, or null. @throws when the key is in use or was used for something else. */
  private replay(slot: string, print: string, key: string): Answer | null {
    if (this.inProgress.has(slot)) {
      throw new ApiError(409, {
        type: 'idempotency_error',
        code: 'idempotency_key_in_use',
        message: 'There is currently another in-progress request using this Stripe idempotency key. Please try again later.',
      });
    }
    const kept = this.world.store.get('reply', slot);
    if (kept === undefined) return null;
    if (kept.fingerprint !== print) {
      throw new ApiError(400, {
        type: 'idempotency_error',
        message: `Keys for idempotent requests can only be used with the same parameters they were first used with. Try using a key other than '${key}' if you meant to execute a different request.`,
      });
    }
    return { status: kept.status, body: kept.body, headers: { 'Request-Id': kept.requestId } };
  }

  private async perform(
    request: ApiRequest,
    on: { owner: string; parameters: { [name: string]: Tree }; slot: string | null; print: string; requestId: string; idempotencyKey: string | null; headers: Record<string, string>; fault: Fault | null },
  ): Promise<Answer> {
    const { fault } = on;
    if (fault?.effect === 'delay') await wait(fault.delayMs ?? 1_000);
    const keep = (status: number, body: string): void => {
      if (on.slot !== null) this.world.store.put('reply', on.slot, { key: on.slot, fingerprint: on.print, status, body, requestId: on.requestId, savedAt: Date.now() });
    };
    const work = (): Answer => this.world.store.change((): Answer => {
      if (fault?.effect === 'refuse') throw errorOf(fault);
      this.world.request = { id: on.requestId, idempotencyKey: on.idempotencyKey };
      try {
        const body = JSON.stringify(this.run(request, on.owner, on.parameters), null, 2);
        const late = fault?.effect === 'fail after' ? errorOf(fault) : null;
        const shown = late === null ? body : JSON.stringify(late.toJson(on.requestId), null, 2);
        // The provider keeps the first answer under the key, a failure after the work included.
        keep(late?.status ?? 200, shown);
        return { status: late?.status ?? 200, body: shown, headers: on.headers };
      } catch (error) {
        if (!(error instanceof ApiError) || !error.keepsWork) throw error;
        const body = JSON.stringify(error.toJson(on.requestId), null, 2);
        keep(error.status, body);
        return { status: error.status, body, headers: on.headers };
      } finally {
        this.world.request = null;
      }
    });
    const answer = attempt(work, (error) => {
      const body = JSON.stringify(error.toJson(on.requestId), null, 2);
      if (hadBegun(error)) this.world.store.change(() => keep(error.status, body));
      return { status: error.status, body, headers: on.headers };
    });
    return fault?.effect === 'drop' ? { ...answer, dead: true } : answer;
  }

  private run(request: ApiRequest, owner: string, parameters: { [name: string]: Tree }): unknown {
    const found = routeFor(request.method, request.path);
    if (found === null) {
      throw new ApiError(404, { type: 'invalid_request_error', message: `Unrecognized request URL (${request.method}: ${request.path}). Please see https://stripe.com/docs or we can help at https://support.stripe.com/.` });
    }
    const params = new Params(parameters);
    const paths = params.texts('expand');
    const made = found.route.run({ world: this.world, params, ids: found.ids, owner });
    params.finish();
    return expand(this.world, present(this.world, made), paths);
  }

  private refusal(error: unknown, requestId: string, headers: Record<string, string>): Answer {
    const known = error instanceof ApiError ? error : error instanceof URIError ? noSuch('object', 'unreadable') : null;
    if (known === null) console.error('The payments stand-in failed:', error);
    const shown = known ?? new ApiError(500, { type: 'api_error', message: 'The payments stand-in failed; see its output.' });
    return { status: shown.status, body: JSON.stringify(shown.toJson(requestId), null, 2), headers };
  }
}

function attempt(work: () => Answer, refuse: (error: ApiError) => Answer): Answer {
  try {
    return work();
  } catch (error) {
    if (error instanceof ApiError) return refuse(error);
    throw error;
  }
}

/**
 * Whether the provider keeps a refusal under the idempotency key: it keeps the first answer of every request that
 * began to run, a failure of its own included, but not one that was turned away at the door.
 */
function hadBegun(error: ApiError): boolean {
  if (error.status === 500) return true;
  return (error.status === 400 || error.status === 402) && !(error.body.code ?? '').startsWith('parameter_') && error.body.code !== 'url_invalid' && error.body.code !== 'resource_missing';
}

function header(value: string | string[] | undefined): string | null {
  const first = Array.isArray(value) ? value[0] : value;
  return first === undefined || first === '' ? null : first.slice(0, 255);
}
