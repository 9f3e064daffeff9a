import type { APIContext, APIRoute, AstroCookies } from 'astro';
import { findActor } from '#server/accounts/actor.ts';
import { recallForm, type FormMemory } from '#server/http/form-memory.ts';
import { makeWord } from './people.ts';

/** What came back from a form: the answer, and what the next page will find. */
export interface Submitted {
  response: Response;
  /** Cookies that the endpoint passed on from the sign-in library. */
  cookies: string[];
  memory: FormMemory;
}

/** The part of Astro's cookies that endpoints use. */
function makeJar(): AstroCookies {
  const values = new Map<string, string>();
  const jar = {
    get: (name: string) => {
      const value = values.get(name);
      return value === undefined ? undefined : { value };
    },
    set: (name: string, value: string) => {
      values.set(name, value);
    },
    delete: (name: string) => {
      values.delete(name);
    },
  };
  return jar as unknown as AstroCookies;
}

/** Sends a form to an endpoint as a browser would, past the front and the middleware. */
export async function submitForm(
  endpoint: APIRoute,
  options: {
    path: string;
    fields: Record<string, string>;
    headers: Headers;
    params?: Record<string, string>;
    method?: 'POST' | 'GET';
  },
): Promise<Submitted> {
  const url = new URL(options.path, 'http://127.0.0.1:4400');
  const headers = new Headers(options.headers);
  const { method = 'POST' } = options;
  const body = method === 'POST' ? new URLSearchParams(options.fields) : null;
  const cookies = makeJar();
  const context = {
    request: new Request(url, { method, headers, body }),
    url,
    params: options.params ?? {},
    cookies,
    locals: { requestId: makeWord(), actor: await findActor(headers), units: 'mm' },
    redirect: (location: string, status: number) => new Response(null, { status, headers: { location } }),
    rewrite: () => Promise.resolve(new Response('the page of the form')),
  } as unknown as APIContext;
  const response = await endpoint(context);
  return { response, cookies: response.headers.getSetCookie(), memory: await recallForm(cookies) };
}
