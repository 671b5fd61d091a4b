/** All jobs of the service: name → what the job carries. Ids only; the rows hold the rest. */
export interface JobPayloads {
  'make-render': { studioId: string, renderId: string }
  'read-scan': { studioId: string, readingId: string }
  'send-letter': { letterId: string }
}
export type JobName = keyof JobPayloads

/** The names as values, for the queues that the migrate step makes and for the worker's boot check. */
export const jobNames = ['make-render', 'read-scan', 'send-letter'] as const satisfies readonly JobName[]

// A name in the union that is missing from the list does not compile.
const _complete: Exclude<JobName, typeof jobNames[number]> extends never ? true : never = true
