import { onCleanup } from 'solid-js'
import type { StudyDesk } from './studyDesk'

/** Ctrl or Cmd with Z takes back, with Shift and Z, or Y, does again; in a field these keys are the field's own. */
export function acceptUndoKeys(desk: StudyDesk): void {
  const press = (event: KeyboardEvent) => {
    if (!(event.ctrlKey || event.metaKey) || event.altKey) return
    if (event.target instanceof HTMLInputElement && event.target.type === 'text') return
    const key = event.key.toLowerCase()
    if (key === 'z') event.shiftKey ? desk.redo() : desk.undo()
    else if (key === 'y' && !event.shiftKey) desk.redo()
    else return
    event.preventDefault()
  }
  window.addEventListener('keydown', press)
  onCleanup(() => window.removeEventListener('keydown', press))
}
