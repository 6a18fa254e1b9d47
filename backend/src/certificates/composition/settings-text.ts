/** Settings of a fit in words, with what was changed by hand and why. */
import type { FitSettings } from '@strainwright/common/contract/runs';

export function settingsText(settings: FitSettings): string {
  return settings.kind === 'pulse' ? pulseText(settings) : regionText(settings);
}

function pulseText(settings: Extract<FitSettings, { kind: 'pulse' }>): string {
  const byHand = settings.arrivals.map((a) => `${a.wave} of ${a.trace} set by hand at ${(a.time * 1e6).toFixed(3)} µs (${a.reason})`);
  return [`${settings.picker} picker`, ...byHand].join('; ');
}

function regionText({ region }: Extract<FitSettings, { kind: 'stress-strain' }>): string {
  const microstrain = (strain: number) => `${Number((strain * 1e6).toPrecision(4))} µε`;
  const megapascal = (stress: number) => `${Number((stress / 1e6).toPrecision(4))} MPa`;
  switch (region.by) {
    case 'automatic': return 'linear region found automatically';
    case 'chord between strains': return `chord between ${microstrain(region.from)} and ${microstrain(region.to)}`;
    case 'chord between stresses': return `chord between ${megapascal(region.from)} and ${megapascal(region.to)}`;
    case 'by hand': return `region set by hand, ${microstrain(region.from)} to ${microstrain(region.to)} (${region.reason})`;
  }
}
