import { detectEncoding, looksBinary } from './decode-text';

const TEXT = 'Dehnung längs [µm/m];Kraft [kN]\r\n1,5;2\r\n';

describe('encoding', () => {
  it.each<[string, Uint8Array, string]>([
    ['ASCII', Buffer.from('Time;Load\n1;2\n'), 'utf-8'],
    ['UTF-8', Buffer.from(TEXT), 'utf-8'],
    ['UTF-8 with a mark', Buffer.from(`\ufeff${TEXT}`), 'utf-8'],
    ['UTF-8 cut within µ', Buffer.from(TEXT).subarray(0, Buffer.from(TEXT).indexOf(0xb5)), 'utf-8'],
    ['windows-1252', Buffer.from(TEXT, 'latin1'), 'windows-1252'],
    ['UTF-16 with a mark', Buffer.from(`\ufeff${TEXT}`, 'utf16le'), 'utf-16le'],
    ['UTF-16 without a mark', Buffer.from(TEXT, 'utf16le'), 'utf-16le'],
    ['big-endian UTF-16 with a mark', Buffer.from(`\ufeff${TEXT}`, 'utf16le').swap16(), 'utf-16be'],
    ['big-endian UTF-16 without a mark', Buffer.from(TEXT, 'utf16le').swap16(), 'utf-16be'],
  ])('%s is told', (_, bytes, encoding) => {
    expect(detectEncoding(bytes)).toBe(encoding);
    expect(looksBinary(bytes)).toBe(false);
  });
});

describe('what is no text', () => {
  it.each<[string, number[]]>([
    ['a PNG picture', [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13, 0x49, 0x48, 0x44, 0x52, 0, 0, 2, 0, 0, 0, 1, 0x80]],
    ['an old workbook', [0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0x3e, 0, 3, 0]],
    ['doubles in binary', [...new Uint8Array(Float64Array.from({ length: 64 }, (_, i) => i * 0.1).buffer)]],
  ])('%s looks binary', (_, bytes) => {
    expect(looksBinary(Uint8Array.from(bytes))).toBe(true);
  });
});
