/** A plot: ink line, verdigris fit, a shaded window whose ends can be dragged, moved by arrow keys or typed; saved as a picture. */
import { Box, Button, Stack, Typography } from '@mui/material';
import { useTheme } from '@mui/material/styles';
import { useEffect, useRef, useState } from 'react';
import uPlot from 'uplot';
import 'uplot/dist/uPlot.min.css';
import { MONO } from '../theme/tokens';
import { NumberField } from './fields';

export interface PlotSeries { name: string; values: readonly (number | null)[]; role: 'data' | 'fit' | 'other' }
export interface PlotWindow { from: number; to: number; onChange?: (from: number, to: number) => void }

interface Props {
  title: string;
  /** Increasing, or any order when `points` are drawn. */
  x: readonly number[];
  series: readonly PlotSeries[];
  xLabel: string;
  yLabel: string;
  summary: string;
  window?: PlotWindow;
  height?: number;
  points?: boolean;
}

type Colours = { ink: string; accent: string; quiet: string; hairline: string };

function drawn(series: readonly PlotSeries[], colours: Colours, points: boolean): uPlot.Series[] {
  return [{}, ...series.map((s): uPlot.Series => ({
    label: s.name, stroke: s.role === 'fit' ? colours.accent : s.role === 'data' ? colours.ink : colours.quiet, width: s.role === 'fit' ? 2 : 1,
    paths: points && s.role !== 'fit' ? () => null : undefined, points: { show: points && s.role !== 'fit', size: 4, fill: colours.ink }, spanGaps: true,
  }))];
}

/** Shades the window and marks its ends. */
function shade(u: uPlot, window: PlotWindow, colour: string): void {
  const [a, b] = [u.valToPos(window.from, 'x', true), u.valToPos(window.to, 'x', true)];
  const { ctx } = u;
  ctx.save();
  ctx.globalAlpha = 0.14;
  ctx.fillStyle = colour;
  ctx.fillRect(a, u.bbox.top, b - a, u.bbox.height);
  ctx.globalAlpha = 1;
  for (const x of [a, b]) ctx.fillRect(x - 1, u.bbox.top, 2, u.bbox.height);
  ctx.restore();
}

export function Plot({ title, x, series, xLabel, yLabel, summary, window, height = 320, points = false }: Props) {
  const holder = useRef<HTMLDivElement>(null);
  const plot = useRef<uPlot | null>(null);
  const latest = useRef(window);
  const theme = useTheme();
  const [scheme, setScheme] = useState(0);

  useEffect(() => {
    latest.current = window;
    plot.current?.redraw(false);
  }, [window]);

  useEffect(() => {
    const watcher = new MutationObserver(() => setScheme((n) => n + 1));
    watcher.observe(document.documentElement, { attributes: true, attributeFilter: ['data-scheme'] });
    return () => watcher.disconnect();
  }, []);

  useEffect(() => {
    const element = holder.current;
    if (element === null) return undefined;
    const variable = (name: string) => getComputedStyle(document.documentElement).getPropertyValue(`--mui-palette-${name}`).trim();
    const colours = { ink: variable('text-primary'), accent: variable('primary-main'), quiet: variable('text-secondary'), hairline: variable('divider') };
    const axis = (label: string): uPlot.Axis => ({ label, stroke: colours.ink, font: `12px ${MONO}`, labelFont: '12px Roboto', grid: { stroke: colours.hairline, width: 1 }, ticks: { stroke: colours.hairline } });
    const made = new uPlot({
      width: element.clientWidth || 600, height, scales: { x: { time: false } }, axes: [axis(xLabel), { ...axis(yLabel), size: 70 }], series: drawn(series, colours, points),
      cursor: { drag: { x: false, y: false } }, legend: { live: true },
      hooks: { drawClear: [(u) => latest.current !== undefined && shade(u, latest.current, colours.accent)] },
    }, [Float64Array.from(x), ...series.map((s) => [...s.values])] as uPlot.AlignedData, element);
    plot.current = made;
    const resize = new ResizeObserver(() => made.setSize({ width: element.clientWidth, height }));
    resize.observe(element);
    return () => {
      resize.disconnect();
      made.destroy();
      plot.current = null;
    };
  }, [x, series, xLabel, yLabel, height, points, scheme, theme]);

  const drag = (event: React.PointerEvent) => {
    const u = plot.current;
    if (u === null || window?.onChange === undefined) return;
    const left = event.clientX - u.over.getBoundingClientRect().left;
    const at = u.posToVal(left, 'x');
    const end = Math.abs(at - window.from) < Math.abs(at - window.to) ? 'from' : 'to';
    if (Math.abs(u.valToPos(window[end], 'x') - left) > 24) return;
    event.preventDefault();
    const move = (e: PointerEvent) => moveEnd(end, u.posToVal(e.clientX - u.over.getBoundingClientRect().left, 'x'));
    const stop = () => {
      globalThis.removeEventListener('pointermove', move);
      globalThis.removeEventListener('pointerup', stop);
    };
    globalThis.addEventListener('pointermove', move);
    globalThis.addEventListener('pointerup', stop);
  };
  const moveEnd = (end: 'from' | 'to', value: number) => {
    const w = latest.current;
    if (w === undefined) return;
    w.onChange?.(end === 'from' ? Math.min(value, w.to) : w.from, end === 'to' ? Math.max(value, w.from) : w.to);
  };
  const nudge = (end: 'from' | 'to') => (event: React.KeyboardEvent) => {
    const step = ((x.at(-1) ?? 1) - (x[0] ?? 0)) / 200;
    const direction = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
    if (direction === 0 || window === undefined) return;
    event.preventDefault();
    moveEnd(end, window[end] + direction * step * (event.shiftKey ? 10 : 1));
  };
  const save = () => {
    const canvas = plot.current?.ctx.canvas;
    if (canvas === undefined) return;
    const link = document.createElement('a');
    link.href = canvas.toDataURL('image/png');
    link.download = `${title}.png`;
    link.click();
  };
  return (
    <Box component="figure" sx={{ m: 0 }}>
      <Box ref={holder} onPointerDown={drag} role="img" aria-label={`${title}. ${summary}`} sx={{ width: '100%', overflow: 'hidden', touchAction: 'pan-y', '& .u-legend': { fontFamily: MONO, fontSize: 12 } }} />
      {window?.onChange !== undefined && (
        <Stack direction="row" spacing={2} sx={{ mt: 1, maxWidth: 480 }}>
          {(['from', 'to'] as const).map((end) => (
            <Box key={end} onKeyDown={nudge(end)} sx={{ flex: 1 }}>
              <NumberField label={`Window ${end}, ${xLabel}`} value={Number(window[end].toPrecision(6))} onChange={(v) => v !== null && moveEnd(end, v)} hint="Arrow keys move it" />
            </Box>
          ))}
        </Stack>
      )}
      <Stack direction="row" component="figcaption" spacing={2} sx={{ alignItems: 'center', mt: 0.5 }}>
        <Typography variant="caption" color="textSecondary">{summary}</Typography>
        <Button size="small" variant="text" onClick={save} className="no-print" sx={{ ml: 'auto !important' }}>Save as picture</Button>
      </Stack>
    </Box>
  );
}
