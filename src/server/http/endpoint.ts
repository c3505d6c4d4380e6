import type { APIContext, APIRoute } from 'astro';
import type { z } from 'zod';
import type { Problem } from '~/domain/result.ts';
import { now } from '../clock.ts';
import { Refusal, signedOut } from '../errors.ts';
import { log } from '../log.ts';
import type { Viewer } from '../viewer.ts';
import { jsonResponse } from './json-response.ts';
import { problemResponse, refusalResponse } from './problem.ts';

/** What an endpoint's deed is given. */
export interface Asked<Body, Query, Who> {
  readonly body: Body;
  readonly query: Query;
  readonly params: Readonly<Record<string, string | undefined>>;
  readonly viewer: Who;
  readonly at: Date;
  readonly requestId: string;
  readonly context: APIContext;
}

interface Spec<Body, Query, Who> {
  /** The body's schema; absent means that none is read. */
  readonly body?: z.ZodType<Body>;
  /** The query string's schema: every value is text. */
  readonly query?: z.ZodType<Query>;
  readonly run: (asked: Asked<Body, Query, Who>) => Promise<unknown>;
}

/** Zod's issues as our problems, with dotted paths. */
export const problemsOf = (error: z.ZodError): Problem[] =>
  error.issues.flatMap((issue) => {
    const path = issue.path.join('.');
    if (issue.code === 'unrecognized_keys') return issue.keys.map((key) => ({ path: path ? `${path}.${key}` : key, message: 'This field is not known here.' }));
    return [{ path, message: issue.message }];
  });

async function readJson(request: Request): Promise<unknown> {
  const type = request.headers.get('content-type') ?? '';
  if (!/^application\/(json|[a-z.+-]+\+json)\b/i.test(type)) return problemResponse(415, 'Send the body as application/json.');
  try {
    return JSON.parse(await request.text());
  } catch {
    return problemResponse(400, 'The body is not valid JSON.', [{ path: '', message: 'This is not valid JSON.' }]);
  }
}

function handle<Body, Query, Who>(spec: Spec<Body, Query, Who>, who: (viewer: Viewer | null) => Who): APIRoute {
  return async (context) => {
    try {
      const viewer = who(context.locals.viewer);
      let query = undefined as Query;
      if (spec.query) {
        const params = context.url.searchParams;
        const repeated = [...new Set(params.keys())].filter((key) => params.getAll(key).length > 1);
        if (repeated.length > 0) return problemResponse(422, 'Some input cannot be used.', repeated.map((path) => ({ path, message: 'Give this once.' })));
        const read = spec.query.safeParse(Object.fromEntries(params));
        if (!read.success) return problemResponse(422, 'Some input cannot be used.', problemsOf(read.error));
        query = read.data;
      }
      let body = undefined as Body;
      if (spec.body) {
        const json = await readJson(context.request);
        if (json instanceof Response) return json;
        const read = spec.body.safeParse(json);
        if (!read.success) return problemResponse(422, 'Some input cannot be used.', problemsOf(read.error));
        body = read.data;
      }
      const answer = await spec.run({ body, query, params: context.params, viewer, at: now(), requestId: context.locals.requestId, context });
      if (answer instanceof Response) return answer;
      if (answer === undefined) return new Response(null, { status: 204 });
      return jsonResponse(context.request, JSON.stringify(answer));
    } catch (error) {
      if (error instanceof Refusal) return refusalResponse(error);
      log().error({ err: error, requestId: context.locals.requestId, path: context.routePattern }, 'endpoint failed');
      return problemResponse(500, 'Something went wrong on our side. Nothing you sent was half done; try again.');
    }
  };
}

/** An endpoint that anyone may call; `viewer` may be null. */
export const openEndpoint = <Body = undefined, Query = undefined>(spec: Spec<Body, Query, Viewer | null>): APIRoute => handle(spec, (viewer) => viewer);

/** An endpoint for a signed-in account; 401 otherwise. What the account may do is decided in the command. */
export const accountEndpoint = <Body = undefined, Query = undefined>(spec: Spec<Body, Query, Viewer>): APIRoute =>
  handle(spec, (viewer) => {
    if (!viewer) throw signedOut();
    return viewer;
  });
