/** Files larger than this are refused before they are read. */
const LARGEST_FILE = 20_000_000

// Node and browsers both have it; the core is compiled without the types of either.
declare const TextDecoder: new (label: string, options: { fatal: boolean }) => { decode(bytes: Uint8Array): string }

export type Decoded = { readonly ok: true; readonly text: string } | { readonly ok: false; readonly message: string }

/** The text of a file: at most 20 MB, UTF-8, a byte order mark at its start dropped. */
export function decode(bytes: Uint8Array | string): Decoded {
  if (bytes.length > LARGEST_FILE) {
    return { ok: false, message: `the file is larger than 20 MB (${(bytes.length / 1e6).toFixed(1)} MB)` }
  }
  if (typeof bytes === 'string') return { ok: true, text: bytes.startsWith('\ufeff') ? bytes.slice(1) : bytes }
  try {
    return { ok: true, text: new TextDecoder('utf-8', { fatal: true }).decode(bytes) }
  } catch {
    return { ok: false, message: 'the file is not UTF-8 text; save it as UTF-8' }
  }
}
