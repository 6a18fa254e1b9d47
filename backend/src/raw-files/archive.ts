/** Looks into a workbook's archive before a reader unpacks it: how large it really is, and what its sheets are called. */
import { TabularRefused } from '@strainwright/common/tabular/tabular-refused';
import { openPromise, type Entry, type ZipFile } from 'yauzl';

const LARGEST_UNPACKED = 1024 ** 3;
const LARGEST_RATIO = 100;
const RATIO_COUNTS_FROM = 10 * 1024 ** 2;
const MOST_ENTRIES = 1000;
/** Bytes of the archive that no entry of its directory accounts for; a reader that streams could find more to unpack there. */
const LARGEST_GAP = 64 * 1024;
const HEADERS = 30 + 46 + 24;

const WORKBOOK = 'xl/workbook.xml';
const RELATIONS = 'xl/_rels/workbook.xml.rels';
const LARGEST_PART = 1024 ** 2;

/**
 * Refuses an archive that would unpack to more than 1 GB or, above 10 MB, to more than 100 times its size, or has more than 1000
 * entries: by what its directory says, which costs nothing, and then by what comes out, for a directory may lie.
 * @returns names of the sheets by the number of their part
 * @throws TabularRefused for an archive bomb or a broken archive
 */
export async function scanArchive(path: string, size: number): Promise<Map<string, string>> {
  try {
    const archive = await openPromise(path, { autoClose: false });
    try {
      const entries = await listed(archive, size);
      const parts = new Map<string, string>();
      for (const entry of entries) {
        const text = await unpacked(archive, entry);
        if (text !== null) parts.set(entry.fileName, text);
      }
      return sheetNames(parts.get(WORKBOOK) ?? '', parts.get(RELATIONS) ?? '');
    } finally {
      archive.close();
    }
  } catch (error) {
    if (error instanceof TabularRefused) throw error;
    throw new TabularRefused(error instanceof Error && /too many bytes/.test(error.message) ? 'archive-too-large' : 'workbook-broken');
  }
}

async function listed(archive: ZipFile, size: number): Promise<Entry[]> {
  const entries: Entry[] = [];
  let unpackedSize = 0;
  let accounted = 0;
  for await (const entry of archive.eachEntry()) {
    entries.push(entry);
    unpackedSize += entry.uncompressedSize;
    accounted += entry.compressedSize + 2 * entry.fileNameLength + 2 * entry.extraFieldLength + entry.fileCommentLength + HEADERS;
    if (entries.length > MOST_ENTRIES || unpackedSize > LARGEST_UNPACKED || (unpackedSize > RATIO_COUNTS_FROM && unpackedSize > LARGEST_RATIO * size)) throw new TabularRefused('archive-too-large');
  }
  if (size - accounted > LARGEST_GAP) throw new TabularRefused('workbook-broken');
  return entries;
}

/** Unpacks an entry, which fails when it holds more bytes than the directory says; keeps the text of the two parts that name the sheets. */
async function unpacked(archive: ZipFile, entry: Entry): Promise<string | null> {
  const kept = (entry.fileName === WORKBOOK || entry.fileName === RELATIONS) && entry.uncompressedSize <= LARGEST_PART;
  const chunks: Buffer[] = [];
  for await (const chunk of await archive.openReadStreamPromise(entry)) if (kept && Buffer.isBuffer(chunk)) chunks.push(chunk);
  return kept ? Buffer.concat(chunks).toString('utf8') : null;
}

const ENTITIES: Readonly<Record<string, string>> = { amp: '&', lt: '<', gt: '>', quot: '"', apos: "'" };
const plain = (text: string) => text.replace(/&(?:#x([0-9a-f]+)|#(\d+)|(\w+));/gi, (whole, hex: string | undefined, code: string | undefined, name: string | undefined) => {
  if (hex !== undefined || code !== undefined) return String.fromCodePoint(hex === undefined ? Number(code) : Number.parseInt(hex, 16));
  return ENTITIES[name ?? ''] ?? whole;
});
const attribute = (tag: string, name: string) => plain(new RegExp(`\\s${name}="([^"]*)"`).exec(tag)?.[1] ?? '');

/** Sheet names by the number in the name of their part, `xl/worksheets/sheet<number>.xml`. */
function sheetNames(workbook: string, relations: string): Map<string, string> {
  const targets = new Map([...relations.matchAll(/<(?:\w+:)?Relationship\s[^>]*>/g)].map(([tag]) => [attribute(tag, 'Id'), attribute(tag, 'Target')]));
  const names = new Map<string, string>();
  for (const [tag] of workbook.matchAll(/<(?:\w+:)?sheet\s[^>]*>/g)) {
    const number = /sheet(\d+)\.xml$/.exec(targets.get(attribute(tag, '(?:\\w+:)?id')) ?? '')?.[1];
    if (number !== undefined) names.set(number, attribute(tag, 'name'));
  }
  return names;
}
