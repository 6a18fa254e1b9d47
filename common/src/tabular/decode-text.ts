/** Bytes of a text file to text, whatever the test frame's computer wrote: UTF-8, UTF-16 with or without a mark, or windows-1252. */
export type Encoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';

/** Told from the byte order mark, from zero bytes in every other place, or from whether the bytes are valid UTF-8. */
export function detectEncoding(head: Uint8Array): Encoding {
  if (head[0] === 0xff && head[1] === 0xfe) return 'utf-16le';
  if (head[0] === 0xfe && head[1] === 0xff) return 'utf-16be';
  let evenZeros = 0;
  let oddZeros = 0;
  for (let i = 0; i < head.length; i += 1) {
    if (head[i] === 0 && i % 2 === 0) evenZeros += 1;
    else if (head[i] === 0) oddZeros += 1;
  }
  if (oddZeros > head.length / 5 && evenZeros < head.length / 50) return 'utf-16le';
  if (evenZeros > head.length / 5 && oddZeros < head.length / 50) return 'utf-16be';
  return isUtf8(head) ? 'utf-8' : 'windows-1252';
}

/** Valid UTF-8, the last character allowed to be cut by the end of the head. */
function isUtf8(head: Uint8Array): boolean {
  for (let cut = 0; cut < 4 && cut < head.length; cut += 1) {
    try {
      new TextDecoder('utf-8', { fatal: true }).decode(head.subarray(0, head.length - cut));
      return true;
    } catch {
      continue;
    }
  }
  return head.length === 0;
}

/** True for bytes that are no text: many control characters once decoded. */
export function looksBinary(head: Uint8Array): boolean {
  const text = new TextDecoder(detectEncoding(head)).decode(head);
  let control = 0;
  for (let i = 0; i < text.length; i += 1) {
    const code = text.charCodeAt(i);
    if (code === 0 || code === 0xfffd || (code < 32 && code !== 9 && code !== 10 && code !== 13 && code !== 12)) control += 1;
  }
  return control > Math.max(2, text.length / 100);
}
