import type { SessionLine } from '../../pk/prescription'
import { multipleOf } from '../../units/spacing'
import type { Marks } from './marks'
import { brief, withUnit } from './number'
import type { Marked, Prose } from './prose'
import type { Showing } from './showing'

/** The dialysis sessions in a sentence. */
export function sessionsSentence(sessions: readonly SessionLine[], showing: Showing, marks: Marks): Prose {
  const said = sessions.map((session, k): (string | Marked)[] => {
    const at = ['patient', 'sessions', k]
    const time = (key: string, hours: number, label: string, sign?: 'not negative') =>
      marks.quantity([...at, key], showing.typedTime(hours), { label, of: 'time', ...(sign && { sign }) })
    const prose: (string | Marked)[] = [
      time('for', session.duration, 'length of the session'),
      ' from ',
      time('at', session.at, 'start of the session', 'not negative'),
      ' on'
    ]
    if (session.every !== undefined) {
      prose.push(' every ', time('every', multipleOf(session.every, 1), 'interval of the sessions'))
      const { count } = session
      const read = count === undefined ? 'to the end' : count === 1 ? 'once' : `${count} times`
      prose.push(', ', marks.whole([...at, 'count'], read, 'number of sessions', true))
    }
    const clearance = withUnit(brief(session.clearance), 'L/h')
    prose.push(', adding a clearance of ')
    prose.push(marks.quantity([...at, 'clearance'], clearance, { label: 'clearance by dialysis', of: 'clearance' }))
    return prose
  })
  const joined = said.flatMap((part, k) => [k === 0 ? '' : k === said.length - 1 ? ' and ' : ', ', ...part])
  return ['Dialysis: ', ...joined.filter((part) => part !== ''), '.']
}
