import type { RouteLocationRaw } from 'vue-router';

/** One step on the way to a page; the page itself is not among them. */
export interface Crumb {
  label: string;
  to?: RouteLocationRaw;
}
