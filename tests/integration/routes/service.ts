import type { RouteCase } from './route-case'

export const serviceCases: RouteCase[] = [
  { file: 'index.get.ts', row: 'version', good: () => ({}) },
  { file: 'openapi.json.get.ts', row: 'openapi', good: () => ({}) },
  { file: 'health/live.get.ts', row: 'live', good: () => ({}) },
  { file: 'health/ready.get.ts', row: 'ready', good: () => ({}) },
]
