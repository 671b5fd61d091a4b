/** One figure. `goal` is what `value` must not exceed, unless `atLeast`; `ok` is null when it could not be measured. */
export interface Measure {
  name: string
  value: number | null
  unit: string
  goal: number | null
  ok: boolean | null
  /** why it could not be measured, or what a reader should know */
  reason?: string
}

/** What a suite can use; `startService` gives a service of its own on an empty database. */
export interface SuiteContext {
  imageChildProgram: string
  /** a folder for the suite's files, removed afterwards */
  folder: string
  startService: (env?: Record<string, string>) => Promise<RunningService>
}
export interface RunningService { address: string, databaseUrl: string, storage: string, webPid: number, workerPid: number, stop: () => Promise<void> }

/** A suite is a module `server/cli/bench/<suite>.ts` with this as its `run`, and a row in `suites.ts`. */
export type Suite = (context: SuiteContext) => AsyncIterable<Measure>

/** A measured figure against its goal (at most, in its unit). */
export const measured = (name: string, value: number, unit: string, goal: number | null = null): Measure =>
  ({ name, value, unit, goal, ok: goal === null ? null : value <= goal })

/** A figure that could not be measured here. */
export const notMeasured = (name: string, unit: string, goal: number | null, reason: string): Measure =>
  ({ name, value: null, unit, goal, ok: null, reason })
