import type { APIRoute } from 'astro';
import { receiveEvent } from '#server/checkout/receive-event.ts';
import { problemResponse } from '#server/http/problem.ts';

/** Events of the payment service. The signature covers the raw text, so nothing may parse the body before it is checked. */
export const POST: APIRoute = async ({ request, locals }) => {
  try {
    await receiveEvent(await request.text(), request.headers.get('stripe-signature'));
    return new Response(null, { status: 200 });
  } catch (error) {
    return problemResponse(error, locals.requestId);
  }
};
