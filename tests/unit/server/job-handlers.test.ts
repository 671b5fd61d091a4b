import { describe, expect, it, vi } from 'vitest'
import { jobHandlers, requireHandlers } from '../../../server/jobs/handlers'
import { jobNames } from '../../../server/jobs/names'

describe('boot check of jobs', () => {
  it('passes with one handler for each name', () => expect(() => requireHandlers()).not.toThrow())

  it('refuses a job without a handler, a handler without a job, and a name twice', () => {
    expect(() => requireHandlers(jobHandlers, [...jobNames, 'sort-films'])).toThrow('No handler for the job sort-films')
    expect(() => requireHandlers({ ...jobHandlers, 'sort-films': vi.fn() })).toThrow('A handler for sort-films, which is no job')
    expect(() => requireHandlers(jobHandlers, [...jobNames, ...jobNames])).toThrow('named twice')
  })

  it('lets a job wake who does its kind of work', () => {
    const wake = vi.fn()
    void jobHandlers['make-render']({ studioId: 's', renderId: 'r' }, { wake })
    void jobHandlers['read-scan']({ studioId: 's', readingId: 'r' }, { wake })
    void jobHandlers['send-letter']({ letterId: 'l' }, { wake })
    expect(wake.mock.calls).toEqual([['films'], ['readings'], ['letters']])
  })
})
