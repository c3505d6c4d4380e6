/// <reference types="astro/client" />
declare namespace App {
  interface Locals {
    viewer: import('./server/viewer.ts').Viewer | null;
    requestId: string;
    /** Our public origin, for canonical addresses. */
    origin: string;
    /** Set by the middleware when a page refused; `pages/refused.astro` words it. */
    refusal?: { readonly status: number; readonly message: string };
  }
}
