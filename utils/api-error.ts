import type { ErrorCode, Issue } from '#shared/errors'

interface ErrorBody { message?: string, data?: { code?: ErrorCode, issues?: Issue[] } }

/** What went wrong in a request: a stable code and a sentence that a person can act on. */
export class ApiError extends Error {
  constructor(readonly status: number, readonly code: ErrorCode | 'unreachable' | 'passkey_not_used', message: string, readonly issues: Issue[] = []) {
    super(message)
    this.name = 'ApiError'
  }

  static fromBody(status: number, body: ErrorBody | null): ApiError {
    return new ApiError(status, body?.data?.code ?? 'internal', body?.message || 'Something went wrong on our side. Try again in a moment.', body?.data?.issues)
  }

  /** The sentence that belongs to one field of the request, if there is one. */
  issueOf(path: string): string | undefined {
    return this.issues.find(issue => issue.path === path || issue.path.startsWith(`${path}.`))?.message
  }
}

export const apiErrorFrom = async (answer: Response): Promise<ApiError> => ApiError.fromBody(answer.status, await answer.json().catch(() => null))

export const unreachable = () => new ApiError(0, 'unreachable', 'The studio doesn’t answer. Check the connection and try again; nothing is lost.')

/** The sentence to show for whatever was thrown. */
export function sentenceOf(error: unknown): string {
  return error instanceof ApiError ? error.message : 'Something went wrong in this page. Load it again; what was kept is safe.'
}
