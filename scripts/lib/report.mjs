import { readFileSync } from 'node:fs'

/**
 * @typedef {object} Sum
 * @property {string} name of the suite
 * @property {number} passed
 * @property {number} failed everything that did not pass, skipped tests included
 * @property {string[]} problems one text for each failure
 */

const FIRST_LINES = 12

/**
 * A suite that could not be run counts as one failure: silence is not success.
 * @param {string} name
 * @param {string} problem
 * @returns {Sum}
 */
export function failedSum(name, problem) {
  return { name, passed: 0, failed: 1, problems: [`${name}: ${problem}`] }
}

/** A check with a single answer, such as the linter, counts as one test. */
export function checkSum(name, passed, output) {
  return passed ? { name, passed: 1, failed: 0, problems: [] } : failedSum(name, `failed\n${output.trimEnd()}`)
}

/**
 * Sums the report that Vitest wrote. Missing, unreadable or empty reports, files without a test, skipped tests and a bad
 * exit without a failed test all count as failures.
 * @param {string} name
 * @param {string} file of the report
 * @param {number} code Vitest's exit code
 * @returns {Sum}
 */
export function sumReport(name, file, code) {
  let report
  try {
    report = JSON.parse(readFileSync(file, 'utf8'))
  }
  catch (error) {
    return failedSum(name, error.code === 'ENOENT' ? 'wrote no report' : `wrote a report that cannot be read (${error.message})`)
  }
  if (!Array.isArray(report.testResults) || report.testResults.length === 0) return failedSum(name, 'ran no test')
  const sum = { name, passed: 0, failed: 0, problems: [] }
  for (const suite of report.testResults) addFile(sum, suite)
  if (sum.failed === 0 && (code !== 0 || report.success === false)) {
    fail(sum, `all tests passed, but the run ended with code ${code}: an error outside of any test, see above`)
  }
  return sum
}

function fail(sum, problem) {
  sum.failed += 1
  sum.problems.push(`${sum.name}: ${problem}`)
}

function addFile(sum, suite) {
  const tests = suite.assertionResults ?? []
  const failedBefore = sum.failed
  for (const test of tests) {
    if (test.status === 'passed') sum.passed += 1
    else fail(sum, [`${suite.name}: ${test.fullName} (${test.status})`, ...firstLines(test.failureMessages)].join('\n'))
  }
  if (tests.length === 0) fail(sum, [`${suite.name}: no test ran`, ...firstLines([suite.message])].join('\n'))
  else if (suite.status !== 'passed' && sum.failed === failedBefore) fail(sum, [`${suite.name}: failed as a whole`, ...firstLines([suite.message])].join('\n'))
}

function firstLines(messages = []) {
  return messages.filter(Boolean).flatMap(message => message.split('\n').slice(0, FIRST_LINES)).map(line => `    ${line}`)
}

/**
 * The last lines of a run: every failure, then the figures.
 * @param {Sum[]} sums
 * @returns {{ lines: string[], code: number }} the last line is `N passed, N failed`
 */
export function conclude(sums) {
  const passed = sums.reduce((total, sum) => total + sum.passed, 0)
  const failed = sums.reduce((total, sum) => total + sum.failed, 0) + (sums.length === 0 ? 1 : 0)
  const problems = sums.flatMap(sum => sum.problems)
  return {
    lines: [
      ...(problems.length > 0 ? ['', 'What failed:', ...problems] : []),
      '',
      ...sums.map(sum => `${sum.name}: ${sum.passed} passed, ${sum.failed} failed`),
      `${passed} passed, ${failed} failed`,
    ],
    code: failed === 0 && passed > 0 ? 0 : 1,
  }
}
