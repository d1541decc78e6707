import { saveFile } from './saveFile'
import type { StudyDesk } from './studyDesk'
import type { Download } from './worker/protocol'

/** Takes a table away in full precision, with its metadata file. */
export function DownloadButton(props: { desk: StudyDesk; what: Download }) {
  const take = async () => {
    for (const file of await props.desk.worker.download(props.what)) saveFile(file.name, file.content)
  }
  return (
    <button
      type="button"
      class="take"
      title="In full precision, with a file that says what each column means"
      onClick={take}
    >
      Download CSV
    </button>
  )
}
