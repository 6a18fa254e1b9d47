/** Paper and ink: fonts, sizes, hairlines of the printed certificate. */
import { createRequire } from 'node:module';
import pdfmake from 'pdfmake';
import type { Content, CustomTableLayout, StyleDictionary, TableCell, TFontDictionary } from 'pdfmake/interfaces';

const locate = createRequire(__filename).resolve;
const roboto = (face: string) => locate(`@expo-google-fonts/roboto/${face}/Roboto_${face}.ttf`);
const mono = (face: string) => locate(`@expo-google-fonts/roboto-mono/${face}/RobotoMono_${face}.ttf`);

const FONTS: TFontDictionary = {
  Roboto: { normal: roboto('400Regular'), bold: roboto('500Medium'), italics: roboto('400Regular_Italic'), bolditalics: roboto('500Medium_Italic') },
  RobotoMono: { normal: mono('400Regular'), bold: mono('500Medium'), italics: mono('400Regular_Italic'), bolditalics: mono('500Medium_Italic') },
};

/** Gives pdfmake our fonts and nothing else of the machine: no file, no address. */
export function preparePrinter(): typeof pdfmake {
  const allowed = new Set(Object.values(FONTS).flatMap((faces) => Object.values(faces)));
  pdfmake.setFonts(FONTS);
  pdfmake.setLocalAccessPolicy((path) => allowed.has(path));
  pdfmake.setUrlAccessPolicy(() => false);
  return pdfmake;
}

export const INK = '#1C2430';
export const QUIET = '#5A6472';
export const HAIRLINE = '#C9C3B4';
export const WARN = '#7A5200';
export const STOP = '#A3322B';

export const PAGE_MARGINS: [number, number, number, number] = [51, 62, 51, 54];
/** A4 less the margins, pt. */
export const CONTENT_WIDTH = 595.28 - 102;

export const STYLES: StyleDictionary = {
  title: { fontSize: 19, bold: true, lineHeight: 1.1 },
  heading: { fontSize: 10.5, bold: true, margin: [0, 15, 0, 4] },
  resultHeading: { fontSize: 9.5, bold: true, margin: [0, 12, 0, 3] },
  label: { fontSize: 7.5, color: QUIET },
  head: { fontSize: 7.5, color: QUIET },
  small: { fontSize: 7.5, lineHeight: 1.15 },
  note: { fontSize: 7.5, color: QUIET, margin: [0, 3, 0, 0], lineHeight: 1.15 },
  number: { font: 'RobotoMono', fontSize: 8 },
  proof: { font: 'RobotoMono', fontSize: 7, lineHeight: 1.15 },
};

/** Rows parted by hairlines, the head by an ink line; nothing upright. */
const HAIRLINES: CustomTableLayout = {
  hLineWidth: (i, node) => (i === 0 || i === node.table.body.length ? 0 : i === (node.table.headerRows ?? 0) ? 0.7 : 0.4),
  hLineColor: (i, node) => (i === (node.table.headerRows ?? 0) ? INK : HAIRLINE),
  vLineWidth: () => 0,
  paddingLeft: (i) => (i === 0 ? 0 : PADDING),
  paddingRight: (i, node) => (i === (node.table.widths?.length ?? 0) - 1 ? 0 : PADDING),
  paddingTop: () => 2.5,
  paddingBottom: () => 2.5,
};

export interface Column {
  readonly head: string;
  /** pt; `*` shares what is left. */
  readonly width: number | '*';
  readonly number?: boolean;
  readonly right?: boolean;
}

const PADDING = 4;

/** Fixed widths, because a shared column of pdfmake's own grows with its longest word, past the page. */
function fixedWidths(columns: readonly Column[]): number[] {
  const between = 2 * PADDING * (columns.length - 1);
  const given = columns.reduce((sum, c) => sum + (c.width === '*' ? 0 : c.width), 0);
  const shared = (CONTENT_WIDTH - between - given) / columns.filter((c) => c.width === '*').length;
  return columns.map((c) => (c.width === '*' ? shared : c.width));
}

/** A table that repeats its head on every page and never breaks a row. */
export function ruledTable(columns: readonly Column[], rows: readonly (readonly (string | Content)[])[]): Content {
  const align = (column: Column | undefined) => (column?.right ? 'right' : 'left');
  const cell = (content: string | Content, i: number): TableCell => {
    const column = columns[i];
    if (typeof content !== 'string') return content as TableCell;
    return { text: content, style: column?.number ? 'number' : undefined, alignment: align(column) };
  };
  return {
    fontSize: 8,
    layout: HAIRLINES,
    table: {
      headerRows: 1, dontBreakRows: true, keepWithHeaderRows: 1,
      widths: fixedWidths(columns),
      body: [columns.map((c): TableCell => ({ text: c.head, style: 'head', alignment: align(c) })), ...rows.map((row) => row.map(cell))],
    },
  };
}

/** Label over value, in a grid; an empty value leaves its place out. */
export function facts(pairs: readonly (readonly [label: string, value: string])[], columns: number): Content {
  const kept = pairs.filter(([, value]) => value !== '');
  const cells = kept.map(([label, value]): TableCell => ({ stack: [{ text: label, style: 'label' }, { text: value, margin: [0, 1, 0, 0] }] }));
  const rows: TableCell[][] = [];
  for (let i = 0; i < cells.length; i += columns) {
    const row = cells.slice(i, i + columns);
    while (row.length < columns) row.push({ text: '' });
    rows.push(row);
  }
  if (rows.length === 0) return [];
  return {
    fontSize: 8.5,
    table: { widths: Array.from({ length: columns }, () => CONTENT_WIDTH / columns - 10), body: rows, dontBreakRows: true },
    layout: { hLineWidth: () => 0, vLineWidth: () => 0, paddingLeft: () => 0, paddingRight: () => 10, paddingTop: () => 2, paddingBottom: () => 4 },
  };
}

export function heading(text: string): Content {
  return { text, style: 'heading', headlineLevel: 1 };
}

export function rule(color = HAIRLINE, width = 0.5): Content {
  return { canvas: [{ type: 'line', x1: 0, y1: 0, x2: CONTENT_WIDTH, y2: 0, lineWidth: width, lineColor: color }] };
}
