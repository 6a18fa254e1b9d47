/** Paper and ink: every colour and measure that the theme is made of. */
export const light = {
  ground: '#F6F4EE', surface: '#FFFFFF', ink: '#1C2430', quiet: '#565E6B', hairline: '#D9D4C7', accent: '#1F6F6B', onAccent: '#FFFFFF', wash: '#E7F0EE',
  note: '#4A6FA5', warn: '#8A5C00', stop: '#A3322B', good: '#2F6B3A',
};

export const dark: typeof light = {
  ground: '#12171C', surface: '#1A2129', ink: '#E6E2D8', quiet: '#A3A9B2', hairline: '#36404B', accent: '#6FC2BB', onAccent: '#0E1A1A', wash: '#1E2F31',
  note: '#8FB2E3', warn: '#E0B04A', stop: '#F08A80', good: '#85C891',
};

export const TEXT = '"Roboto", "Helvetica Neue", Arial, sans-serif';
export const MONO = '"Roboto Mono", ui-monospace, monospace';
export const RADIUS = 4;
