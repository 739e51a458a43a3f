import { config } from 'zod';

/**
 * Entry of the paddock's bundle. Schemas probe `new Function` when they are made, which the content policy reports; so
 * they are told first, and everything that makes schemas comes in afterwards.
 */
export async function mount(element: HTMLElement): Promise<void> {
  config({ jitless: true });
  (await import('./paddock-app.tsx')).mount(element);
}
