import { relative } from 'node:path'

/**
 * Counts the tests of vitest's JSON report. A file that could not be run counts as one failed test, since its own are in no list.
 * @param report the parsed report
 * @param root folder from which files are named
 */
export function countReport(report, root) {
  const counted = { passed: 0, failed: 0, skipped: 0, failures: [] }
  for (const { name, status, message, assertionResults } of report.testResults) {
    const where = relative(root, name)
    for (const test of assertionResults) {
      if (test.status === 'passed') counted.passed++
      else if (test.status === 'failed') {
        counted.failed++
        const why = (test.failureMessages?.[0] ?? '').split('\n').slice(0, 6).join('\n    ')
        counted.failures.push(`${where}: ${test.fullName}\n    ${why}`)
      } else counted.skipped++
    }
    if (status === 'failed' && !assertionResults.some((test) => test.status === 'failed')) {
      counted.failed++
      counted.failures.push(`${where}: ${message || 'the file could not be run'}`)
    }
  }
  return counted
}
