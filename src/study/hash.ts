import { sha256 } from '@noble/hashes/sha2.js'
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js'
import { canonicalJson } from './canonicalJson'

/** SHA-256 (FIPS 180-4) of the canonical form (RFC 8785) of a file's content, in lower-case hexadecimal. */
export function contentHash(content: unknown): string {
  return bytesToHex(sha256(utf8ToBytes(canonicalJson(content))))
}
