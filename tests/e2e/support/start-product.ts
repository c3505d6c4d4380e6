import { startProduct } from '../../support/product.ts';

/** Starts the product with the demo story told, for every journey; its addresses travel in the environment. */
export default async function globalSetup(): Promise<() => Promise<void>> {
  const product = await startProduct('e2e', { story: true });
  process.env['E2E_ORIGIN'] = product.origin;
  process.env['E2E_MAIL'] = product.mailPage;
  process.env['E2E_PRODUCT'] = JSON.stringify(product.environment);
  return product.stop;
}
