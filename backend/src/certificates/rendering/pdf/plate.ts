/** The constants plate for print: a square with a constant at each corner, solid where measured, outlined where derived. */
import type { ElasticResult } from '@strainwright/common/contract/result';
import type { ConstantName } from '@strainwright/common/contract/vocabulary';
import { statedConstant, SYMBOLS } from '../wording';
import { HAIRLINE, INK, QUIET } from './style';

export const PLATE_WIDTH = 236;
const HEIGHT = 118;
const LEFT = 88;
const RIGHT = PLATE_WIDTH - LEFT;
const TOP = 27;
const BOTTOM = HEIGHT - 27;

/** Clockwise from the upper left. */
const CORNERS: readonly { constant: ConstantName; x: number; y: number }[] = [
  { constant: 'E', x: LEFT, y: TOP },
  { constant: 'nu', x: RIGHT, y: TOP },
  { constant: 'K', x: RIGHT, y: BOTTOM },
  { constant: 'G', x: LEFT, y: BOTTOM },
];

const escaped = (text: string) => text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;');

function label(x: number, y: number, text: string, attributes: string): string {
  const left = x === LEFT;
  return `<text x="${left ? x - 10 : x + 10}" y="${y}" text-anchor="${left ? 'end' : 'start'}" ${attributes}>${escaped(text)}</text>`;
}

function corner(result: ElasticResult, { constant, x, y }: (typeof CORNERS)[number]): string {
  const stated = statedConstant(result, constant);
  const symbol = label(x, y - 2, SYMBOLS[constant], `font-family="Roboto" font-weight="bold" font-size="10" fill="${INK}"`);
  const value = label(x, y + 9, stated === null ? 'not determined' : stated.validated ? stated.text : stated.interval, `font-family="RobotoMono" font-size="7" fill="${stated ? INK : QUIET}"`);
  if (stated === null) return symbol + value;
  const origin = label(x, y + 18, stated.origin, `font-family="Roboto" font-size="6.5" fill="${QUIET}"`);
  const fill = stated.origin === 'measured' ? INK : '#FFFFFF';
  return `<rect x="${x - 4.5}" y="${y - 4.5}" width="9" height="9" fill="${fill}" stroke="${INK}" stroke-width="1"/>${symbol}${value}${origin}`;
}

/** SVG of the plate; all six edges are drawn as hairlines. */
export function plateSvg(result: ElasticResult): string {
  const edges = CORNERS.flatMap((a, i) => CORNERS.slice(i + 1).map((b) => `<line x1="${a.x}" y1="${a.y}" x2="${b.x}" y2="${b.y}" stroke="${HAIRLINE}" stroke-width="0.7"/>`));
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${PLATE_WIDTH}" height="${HEIGHT}" viewBox="0 0 ${PLATE_WIDTH} ${HEIGHT}">${edges.join('')}${CORNERS.map((c) => corner(result, c)).join('')}</svg>`;
}
