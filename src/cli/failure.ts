import type { Issue } from '../pk/issue'

/** The input is at fault: every problem is printed on a line of its own and the exit status is 1. */
export class InputAtFault extends Error {
  constructor(readonly issues: readonly Issue[]) {
    super(issues.map(issueLine).join('\n'))
    this.name = 'InputAtFault'
  }
}

/** `path: message`, or the message alone where the file as a whole is meant. */
export function issueLine(issue: Issue): string {
  return issue.path === '' ? issue.message : `${issue.path}: ${issue.message}`
}
