import { createServer } from 'node:net';

/** The ports of one running house, counted from that of the web process. */
export interface Ports {
  web: number;
  postgres: number;
  objects: number;
  smtp: number;
  mail: number;
  payments: number;
}

/** Web on `base`, everything else on the ports after it. */
export function portsFrom(base: number): Ports {
  return {
    web: base,
    postgres: base + 1,
    objects: base + 2,
    smtp: base + 4,
    mail: base + 5,
    payments: base + 6,
  };
}

/** Whether a port of the loopback address can be taken. */
export function isFree(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => {
      resolve(false);
    });
    probe.listen(port, '127.0.0.1', () => {
      probe.close(() => {
        resolve(true);
      });
    });
  });
}

/** A base from which all ports are free, chosen by chance so that two runs hardly ever meet. */
export async function findFreeBase(): Promise<number> {
  for (let attempt = 0; attempt < 200; attempt += 1) {
    const base = 20_000 + Math.floor(Math.random() * 1_500) * 10;
    const free = await Promise.all(Object.values(portsFrom(base)).map(isFree));
    if (free.every(Boolean)) return base;
  }
  throw new Error('no free ports were found between 20000 and 35000');
}
