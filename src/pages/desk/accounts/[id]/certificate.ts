import { certificateKindOf } from '~/domain/certificate.ts';
import { seeCertificate } from '~/server/commands/see-certificate.ts';
import { openDesk } from '~/server/desk.ts';
import { openEndpoint } from '~/server/http/endpoint.ts';

/** A sawyer's certificate, for moderators. Sent by people, so it may do nothing in the browser: a PDF is downloaded. */
export const GET = openEndpoint({
  async run({ params, viewer, at, context }) {
    openDesk(viewer);
    const { bytes, type, extension } = await seeCertificate(viewer, params['id'] ?? '', certificateKindOf(context.url.searchParams.get('kind')), at);
    return new Response(new Uint8Array(bytes), {
      headers: {
        'content-type': type,
        'content-length': String(bytes.length),
        'content-disposition': `${extension === 'pdf' ? 'attachment' : 'inline'}; filename="certificate.${extension}"`,
        'content-security-policy': "default-src 'none'; img-src 'self'; sandbox",
        'cache-control': 'private, no-store',
      },
    });
  },
});
