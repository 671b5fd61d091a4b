import { sentenceOf } from './api-error'

/** Does something and answers what went wrong, or null: for places that show the sentence beside the thing. */
export async function sentenceIfFailed(work: () => Promise<unknown>): Promise<string | null> {
  try {
    await work()
    return null
  }
  catch (error) {
    return sentenceOf(error)
  }
}
