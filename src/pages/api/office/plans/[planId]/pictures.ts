import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { MAX_UPLOAD_BYTES, removeAsset, uploadAsset } from '#server/publishing/upload-asset.ts';

const schema = z.discriminatedUnion('what', [
  z.object({
    what: z.literal('upload'),
    file: z
      .instanceof(File, { message: 'Choose a picture.' })
      .refine((file) => file.size > 0, 'Choose a picture.')
      .refine((file) => file.size <= MAX_UPLOAD_BYTES, 'A picture may have 12 MB at most.'),
  }),
  z.object({ what: z.literal('remove'), name: z.string().max(120) }),
]);

/** Takes a picture for the draft, or removes one. */
export const POST = formEndpoint({
  schema,
  back: (context) => paths.officePlan(context.params['planId'] ?? ''),
  run: async ({ actor, input, context }) => {
    const planId = context.params['planId'] ?? '';
    const to = paths.officePlan(planId);
    if (input.what === 'remove') {
      await removeAsset(actor, planId, input.name);
      return { to, notice: `${input.name} is removed.` };
    }
    const asset = await uploadAsset({
      actor,
      planId,
      name: input.file.name,
      bytes: new Uint8Array(await input.file.arrayBuffer()),
    });
    return { to, notice: `${asset.name} is there. Use it in the text by that name.` };
  },
});
