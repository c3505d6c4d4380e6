/** The network address of whoever asks, as our front saw it (a client's own header of this name is overwritten there). */
export const clientAddress = (request: Request): string => request.headers.get('x-client-address') ?? 'unknown';
