const DATABASE = 'phasewise'
const STORE = 'studies'
/** Key of the study that was worked on last. */
const LAST = 'last'

/** A study as it was kept in this browser. */
export interface KeptStudy {
  readonly name: string
  readonly bytes: ArrayBuffer
}

/** What is kept from the last visit; `unreadable` is something that is no study as this program keeps it. */
export type Kept =
  | { readonly kind: 'nothing' }
  | { readonly kind: 'study'; readonly study: KeptStudy }
  | { readonly kind: 'unreadable' }

export async function keptStudy(): Promise<Kept> {
  const found = await withStore('readonly', (store) => store.get(LAST))
  if (found === undefined) return { kind: 'nothing' }
  return isStudy(found) ? { kind: 'study', study: { name: found.name, bytes: found.bytes } } : { kind: 'unreadable' }
}

/** Keep a study in place of the last one. */
export async function keepStudy(name: string, content: Blob): Promise<void> {
  const study: KeptStudy = { name, bytes: await content.arrayBuffer() }
  await withStore('readwrite', (store) => store.put(study, LAST))
}

/** Put what is kept aside under another key, so that the next study does not take its place. */
export async function setKeptAside(): Promise<void> {
  const found = await withStore('readonly', (store) => store.get(LAST))
  await withStore('readwrite', (store) => store.put(found, `aside ${new Date().toISOString()}`))
  await withStore('readwrite', (store) => store.delete(LAST))
}

function isStudy(found: unknown): found is KeptStudy {
  if (typeof found !== 'object' || found === null) return false
  return 'name' in found && typeof found.name === 'string' && 'bytes' in found && found.bytes instanceof ArrayBuffer
}

async function withStore<T>(mode: IDBTransactionMode, act: (store: IDBObjectStore) => IDBRequest<T>): Promise<T> {
  const opening = indexedDB.open(DATABASE, 1)
  opening.onupgradeneeded = () => opening.result.createObjectStore(STORE)
  const database = await answered(opening)
  try {
    const transaction = database.transaction(STORE, mode)
    const finished = new Promise<void>((done, fail) => {
      transaction.oncomplete = () => done()
      transaction.onabort = () => fail(transaction.error ?? new Error('the browser gave no reason'))
    })
    const [found] = await Promise.all([answered(act(transaction.objectStore(STORE))), finished])
    return found
  } finally {
    database.close()
  }
}

function answered<T>(request: IDBRequest<T>): Promise<T> {
  return new Promise((done, fail) => {
    request.onsuccess = () => done(request.result)
    request.onerror = () => fail(request.error ?? new Error('the browser gave no reason'))
  })
}
