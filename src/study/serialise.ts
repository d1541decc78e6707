import type { StudyFile } from './file/studySchema'

/** The text of a study file, two blanks a level; reading it gives the same study with the same hash. */
export function serialiseStudy(file: StudyFile): string {
  return `${JSON.stringify(file, null, 2)}\n`
}
