/** What a file is, told from its first bytes; names and headers that clients send are not believed. */
const SIGNATURES: { type: string; at: number; bytes: number[] }[] = [
  { type: 'image/png', at: 0, bytes: [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a] },
  { type: 'image/jpeg', at: 0, bytes: [0xff, 0xd8, 0xff] },
  { type: 'image/webp', at: 8, bytes: [0x57, 0x45, 0x42, 0x50] },
  { type: 'image/gif', at: 0, bytes: [0x47, 0x49, 0x46, 0x38] },
  { type: 'image/tiff', at: 0, bytes: [0x49, 0x49, 0x2a, 0x00] },
  { type: 'image/tiff', at: 0, bytes: [0x4d, 0x4d, 0x00, 0x2a] },
  { type: 'image/bmp', at: 0, bytes: [0x42, 0x4d] },
  { type: 'image/heic', at: 4, bytes: [0x66, 0x74, 0x79, 0x70] },
  { type: 'application/pdf', at: 0, bytes: [0x25, 0x50, 0x44, 0x46, 0x2d] },
  { type: 'application/zip', at: 0, bytes: [0x50, 0x4b, 0x03, 0x04] },
];

export function mediaTypeOf(bytes: Uint8Array): string | null {
  const found = SIGNATURES.find(({ at, bytes: signature }) => signature.every((byte, i) => bytes[at + i] === byte));
  if (found) return found.type;
  const head = new TextDecoder('utf-8').decode(bytes.subarray(0, 1024)).replace(/^\uFEFF/, '').trimStart();
  return /^(<\?xml[^>]*>\s*)?(<!--[\s\S]*?-->\s*)*(<!DOCTYPE svg[^>]*>\s*)?<svg[\s>]/i.test(head) ? 'image/svg+xml' : null;
}
