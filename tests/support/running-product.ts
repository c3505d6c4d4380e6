import type { TestProject } from 'vitest/node';
import { startProduct } from './product.ts';

declare module 'vitest' {
  interface ProvidedContext {
    origin: string;
    mailPage: string;
    productEnvironment: Record<string, string>;
  }
}

/** Starts the product once for all files of `tests/http`. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const product = await startProduct('http');
  project.provide('origin', product.origin);
  project.provide('mailPage', product.mailPage);
  project.provide('productEnvironment', { ...product.environment });
  return product.stop;
}
