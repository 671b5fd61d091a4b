import type { Suite } from './suite'

/** All suites by name; `npm run bench` without a name runs them in this order. */
export const suites: Record<string, () => Promise<{ run: Suite }>> = {
  calibration: () => import('./calibration'),
  chain: () => import('./chain'),
  exposure: () => import('./exposure'),
  load: () => import('./load'),
  preview: () => import('./preview'),
  render: () => import('./render'),
  reading: () => import('./reading'),
  soak: () => import('./soak'),
  uploads: () => import('./uploads'),
}
