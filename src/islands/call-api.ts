/** An endpoint of ours refused, or could not be reached. The message is for a person; `status` is 0 without a connection. */
export class ApiRefusal extends Error {
  readonly status: number;

  constructor(status: number, message: string) {
    super(message);
    this.status = status;
  }
}

interface ProblemDetails {
  readonly detail?: unknown;
  readonly errors?: unknown;
}

function messageIn(details: ProblemDetails | null, status: number): string {
  if (status === 401) return 'You are signed out. Sign in in another window, then try again here: nothing is lost.';
  const first: unknown = Array.isArray(details?.errors) ? (details.errors[0] as { message?: unknown } | undefined)?.message : null;
  if (typeof first === 'string' && first !== '') return first;
  return typeof details?.detail === 'string' && details.detail !== '' ? details.detail : 'That did not work. Try again.';
}

/** Calls one of our own JSON endpoints. @throws ApiRefusal */
export async function callApi<Answer>(method: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE', path: string, body?: unknown): Promise<Answer> {
  let response: Response;
  try {
    response = await fetch(path, {
      method,
      signal: AbortSignal.timeout(20_000),
      ...(body === undefined ? {} : { headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) }),
    });
  } catch {
    throw new ApiRefusal(0, 'There is no connection just now. Try again when there is.');
  }
  if (response.status === 204) return undefined as Answer;
  const json: unknown = await response.json().catch(() => null);
  if (!response.ok) throw new ApiRefusal(response.status, messageIn(json as ProblemDetails | null, response.status));
  return json as Answer;
}
