// Logs are JSON lines on standard output. Ids, kinds, figures and causes only: no bodies, no addresses, no tokens.

const levels = { debug: 10, info: 20, warn: 30, error: 40 } as const
export type LogLevel = keyof typeof levels

/** One line: when, how grave, what happened (`area.what`), and its details. */
export function log(level: LogLevel, event: string, details: Record<string, unknown> = {}): void {
  const least = process.env.LOG_LEVEL as LogLevel | undefined
  if (levels[level] < (levels[least ?? 'info'] ?? levels.info)) return
  const line = { at: new Date().toISOString(), level, process: processName(), event, ...details }
  process.stdout.write(`${JSON.stringify(line, errorsAsText)}\n`)
}

/** What libraries say on the console becomes a log line too, cut short. */
export function takeOverConsole(): void {
  for (const [method, level] of [['log', 'info'], ['info', 'info'], ['warn', 'warn'], ['error', 'error']] as const) {
    console[method] = (...words: unknown[]) => log(level, 'console', {
      text: words.filter(word => typeof word === 'string').join(' ').split('\n')[0]!.slice(0, 200), error: words.find(word => word instanceof Error),
    })
  }
}

const processName = () => `${process.env.PROCESS_NAME ?? 'web'}-${process.pid}`

/** A database driver's error message may quote values that people typed: of those only code and constraint are kept. */
function errorsAsText(_key: string, value: unknown): unknown {
  if (!(value instanceof Error)) return value
  const cause = (value.cause ?? value) as { code?: string, constraint?: string }
  const fromDatabase = /^[0-9A-Z]{5}$/.test(cause.code ?? '')
  const frames = value.stack?.split('\n').filter(line => /^\s+at /.test(line)).slice(0, 12).map(line => line.trim())
  return { name: value.name, code: cause.code, ...fromDatabase ? { constraint: cause.constraint } : { message: value.message.split('\n')[0] }, frames }
}
