import { createContext, useContext } from 'solid-js'
import type { StudyDesk } from './studyDesk'

export const DeskContext = createContext<StudyDesk>()

/** The desk that the component stands on. */
export function useDesk(): StudyDesk {
  const desk = useContext(DeskContext)
  if (desk === undefined) throw new RangeError('this component stands on no desk')
  return desk
}
