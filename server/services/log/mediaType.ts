/** What a file is by its first bytes. Signatures: JPEG (ITU-T T.81), PNG (W3C), WebP (RFC 9649), PDF (ISO 32000). */

const beginsWith = (head: Buffer, bytes: number[], at = 0): boolean =>
  bytes.every((byte, index) => head[at + index] === byte)

const ascii = (text: string): number[] => [...text].map((sign) => sign.charCodeAt(0))

/** No control signs but those of lines and tabs, and valid UTF-8 but for a sign cut off at the end. */
function isText(head: Buffer): boolean {
  if (head.some((byte) => byte < 32 && byte !== 9 && byte !== 10 && byte !== 13)) return false
  return !new TextDecoder('utf-8').decode(head, { stream: true }).includes('\uFFFD')
}

/** Null for what is not kept. Text that a browser could take for a page is sent as plain text all the same. */
export function mediaTypeOf(head: Buffer): string | null {
  if (beginsWith(head, [0xff, 0xd8, 0xff])) return 'image/jpeg'
  if (beginsWith(head, [0x89, ...ascii('PNG'), 0x0d, 0x0a, 0x1a, 0x0a])) return 'image/png'
  if (beginsWith(head, ascii('RIFF')) && beginsWith(head, ascii('WEBP'), 8)) return 'image/webp'
  if (beginsWith(head, ascii('%PDF-'))) return 'application/pdf'
  return isText(head) ? 'text/plain' : null
}
