// Counters and a histogram of our own process in Prometheus' text format (version 0.0.4); small on purpose.

const bucketsSeconds = [0.01, 0.025, 0.05, 0.1, 0.25, 0.5, 1, 2.5, 5, 10]

interface Series { labels: string, count: number, sumSeconds: number, buckets: number[] }
const requests = new Map<string, Series>()

/** `route` is the route's pattern, never the path: ids must not become labels. */
export function countRequest(method: string, route: string, status: number, seconds: number): void {
  const labels = `method="${method}",route="${route}",status="${status}"`
  const series = requests.get(labels) ?? { labels, count: 0, sumSeconds: 0, buckets: bucketsSeconds.map(() => 0) }
  requests.set(labels, series)
  series.count += 1
  series.sumSeconds += seconds
  bucketsSeconds.forEach((bound, i) => {
    if (seconds <= bound) series.buckets[i]! += 1
  })
}

const head = (name: string, kind: string, help: string) => [`# HELP ${name} ${help}`, `# TYPE ${name} ${kind}`]

/** All of it as text; `renders` are the rows' numbers by state. */
export function metricsText(renders: Record<string, number>): string {
  const name = 'emulside_request_seconds'
  const memory = process.memoryUsage()
  return [
    ...head(name, 'histogram', 'Time until a request was answered.'),
    ...[...requests.values()].flatMap(({ labels, count, sumSeconds, buckets }) => [
      ...buckets.map((n, i) => `${name}_bucket{${labels},le="${bucketsSeconds[i]}"} ${n}`),
      `${name}_bucket{${labels},le="+Inf"} ${count}`, `${name}_sum{${labels}} ${sumSeconds}`, `${name}_count{${labels}} ${count}`,
    ]),
    ...head('emulside_renders', 'gauge', 'Film files by state.'),
    ...Object.entries(renders).map(([state, n]) => `emulside_renders{state="${state}"} ${n}`),
    ...head('process_resident_memory_bytes', 'gauge', 'Memory of the web process.'), `process_resident_memory_bytes ${memory.rss}`,
    ...head('process_uptime_seconds', 'gauge', 'Since the web process started.'), `process_uptime_seconds ${process.uptime()}`,
    '',
  ].join('\n')
}
