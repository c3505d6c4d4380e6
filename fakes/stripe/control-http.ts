import type { Control } from './control.ts';
import { ApiError } from './errors.ts';
import type { Fault } from './faults.ts';

const EFFECTS = ['refuse', 'fail after', 'drop', 'drop before', 'delay'] as const;

type Body = { readonly [name: string]: unknown };

const bad = (message: string): ApiError => new ApiError(400, { type: 'invalid_request_error', message });

function text(body: Body, name: string): string {
  const value = body[name];
  if (typeof value !== 'string' || value === '') throw bad(`"${name}" must be a text.`);
  return value;
}

function number(body: Body, name: string, otherwise?: number): number {
  const value = body[name] ?? otherwise;
  if (typeof value !== 'number' || !Number.isFinite(value) || value < 0) throw bad(`"${name}" must be a number, zero or more.`);
  return value;
}

function faultOf(body: Body): Fault {
  const effect = EFFECTS.find((each) => each === body['effect']);
  if (effect === undefined) throw bad(`"effect" must be one of: ${EFFECTS.join(', ')}.`);
  return {
    on: text(body, 'on'),
    times: number(body, 'times', 1),
    effect,
    ...(body['status'] === undefined ? {} : { status: number(body, 'status') }),
    ...(body['code'] === undefined ? {} : { code: text(body, 'code') }),
    ...(body['message'] === undefined ? {} : { message: text(body, 'message') }),
    ...(body['delayMs'] === undefined ? {} : { delayMs: number(body, 'delayMs') }),
  };
}

function settingsOf(body: Body): Parameters<Control['webhooks']>[0] {
  const settings: { -readonly [K in keyof Parameters<Control['webhooks']>[0]]: Parameters<Control['webhooks']>[0][K] } = {};
  for (const name of ['delayMs', 'duplicates', 'shuffleMs', 'dropNext', 'retryBaseMs'] as const) if (body[name] !== undefined) settings[name] = number(body, name);
  if (typeof body['paused'] === 'boolean') settings.paused = body['paused'];
  return settings;
}

/**
 * The control switches over HTTP, under `/_control/`. Bodies and answers are JSON.
 * @throws ApiError for an unknown switch or a body that does not fit it.
 */
export async function answerControl(control: Control, method: string, path: string, body: Body): Promise<unknown> {
  switch (`${method} ${path}`) {
    case 'GET /_control/objects':
      return control.all();
    case 'GET /_control/books':
      return control.books();
    case 'GET /_control/deliveries':
      return control.objects('delivery');
    case 'POST /_control/webhooks':
      return control.webhooks(settingsOf(body));
    case 'POST /_control/resend':
      return { sent: control.resend(body['event'] === undefined ? undefined : text(body, 'event')) };
    case 'POST /_control/quiet':
      return { quiet: await control.quiet(number(body, 'timeoutMs', 10_000)) };
    case 'POST /_control/faults':
      control.fault(faultOf(body));
      return { ok: true };
    case 'POST /_control/faults/clear':
      control.clearFaults();
      return { ok: true };
    case 'POST /_control/refunds/fail-next':
      control.failNextRefunds(number(body, 'count', 1));
      return { ok: true };
    case 'POST /_control/refunds/fail':
      control.failRefund(text(body, 'refund'));
      return { ok: true };
    case 'POST /_control/pay':
      return control.pay(text(body, 'session'), body['card'] === undefined ? undefined : text(body, 'card'));
    case 'POST /_control/sessions/expire':
      return control.expireSession(text(body, 'session'));
    case 'POST /_control/accounts/onboard':
      return control.onboard(text(body, 'account'), {
        verified: body['verified'] !== false,
        ...(body['accountNumber'] === undefined ? {} : { accountNumber: text(body, 'accountNumber') }),
      });
    case 'POST /_control/accounts/restrict':
      return control.restrict(text(body, 'account'));
    case 'POST /_control/disputes/open':
      return control.openDispute(text(body, 'charge'));
    case 'POST /_control/disputes/close': {
      const outcome = text(body, 'outcome');
      if (outcome !== 'won' && outcome !== 'lost') throw bad('"outcome" must be won or lost.');
      return control.closeDispute(text(body, 'dispute'), outcome);
    }
    case 'POST /_control/advance':
      control.advance(number(body, 'seconds'));
      return { ok: true };
    case 'POST /_control/top-up':
      control.topUp(number(body, 'cents'));
      return { ok: true };
    case 'POST /_control/reset':
      control.reset();
      return { ok: true };
    default:
      throw new ApiError(404, { type: 'invalid_request_error', message: `There is no switch ${method} ${path}.` });
  }
}
