import { onCleanup } from 'solid-js'
import type { StudyDesk } from './studyDesk'

/** A file dropped anywhere on the window is opened; the page shows that it may be let go. */
export function acceptDrops(desk: StudyDesk): void {
  const root = document.documentElement
  const over = (event: DragEvent) => {
    if (!event.dataTransfer?.types.includes('Files')) return
    event.preventDefault()
    event.dataTransfer.dropEffect = 'copy'
    root.classList.add('dropping')
  }
  const leave = (event: DragEvent) => {
    if (event.relatedTarget === null) root.classList.remove('dropping')
  }
  const drop = (event: DragEvent) => {
    root.classList.remove('dropping')
    const file = event.dataTransfer?.files[0]
    if (file === undefined) return
    event.preventDefault()
    void desk.open({ name: file.name, content: file })
  }
  window.addEventListener('dragover', over)
  window.addEventListener('dragleave', leave)
  window.addEventListener('drop', drop)
  onCleanup(() => {
    window.removeEventListener('dragover', over)
    window.removeEventListener('dragleave', leave)
    window.removeEventListener('drop', drop)
  })
}
