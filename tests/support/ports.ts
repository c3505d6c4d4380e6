import { createServer, type AddressInfo } from 'node:net';

/** Free ports on loopback, each different from the others. */
export async function freePorts(count: number): Promise<number[]> {
  const servers = await Promise.all(
    Array.from({ length: count }, () => new Promise<ReturnType<typeof createServer>>((resolve) => {
      const server = createServer();
      server.listen(0, '127.0.0.1', () => resolve(server));
    })),
  );
  const ports = servers.map((server) => (server.address() as AddressInfo).port);
  await Promise.all(servers.map((server) => new Promise((resolve) => server.close(resolve))));
  return ports;
}

/** The first of seven free ports in a row, as one run of the product needs them. */
export async function freeBase(): Promise<number> {
  const free = (port: number): Promise<boolean> =>
    new Promise((resolve) => {
      const server = createServer();
      server.once('error', () => resolve(false));
      server.listen(port, '127.0.0.1', () => server.close(() => resolve(true)));
    });
  for (;;) {
    const base = 20_000 + Math.floor(Math.random() * 20_000);
    const answers = await Promise.all(Array.from({ length: 7 }, (_, index) => free(base + index)));
    if (answers.every(Boolean)) return base;
  }
}
