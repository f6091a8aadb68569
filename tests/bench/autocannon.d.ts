declare module 'autocannon' {
  type Options = { url: string; connections: number; overallRate: number; duration: number; requests?: { path: string }[] }
  type Result = {
    latency: { p50: number; p99: number; max: number }
    requests: { total: number }
    non2xx: number
    errors: number
    timeouts: number
  }
  export default function autocannon(options: Options): Promise<Result>
}
