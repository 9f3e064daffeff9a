import * as z from 'zod';
import { exportPersonalData } from '#server/accounts/export-personal-data.ts';
import { requireUser } from '#server/accounts/may.ts';
import { jsonEndpoint } from '#server/http/endpoint.ts';

export const GET = jsonEndpoint(z.object({}), async ({ actor }) => {
  const data = await exportPersonalData(requireUser(actor));
  return new Response(JSON.stringify(data, null, 2), {
    headers: {
      'content-type': 'application/json; charset=utf-8',
      'content-disposition': 'attachment; filename="benchleaf-data.json"',
      'cache-control': 'private, no-store',
    },
  });
});
