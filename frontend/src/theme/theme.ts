/** The one theme: tokens become MUI's palette, defaults and variants, light and dark. */
import { createTheme } from '@mui/material/styles';
import type {} from '@mui/x-data-grid/themeAugmentation';
import { dark, light, MONO, RADIUS, TEXT } from './tokens';

const palette = (t: typeof light) => ({
  primary: { main: t.accent, contrastText: t.onAccent },
  secondary: { main: t.ink, contrastText: t.surface },
  info: { main: t.note }, warning: { main: t.warn }, error: { main: t.stop }, success: { main: t.good },
  background: { default: t.ground, paper: t.surface },
  text: { primary: t.ink, secondary: t.quiet },
  divider: t.hairline,
  action: { hover: t.wash, selected: t.wash },
});

export const theme = createTheme({
  cssVariables: { colorSchemeSelector: 'data-scheme' },
  colorSchemes: { light: { palette: palette(light) }, dark: { palette: palette(dark) } },
  shape: { borderRadius: RADIUS },
  spacing: 8,
  typography: {
    fontFamily: TEXT, fontSize: 14,
    h1: { fontSize: '1.5rem', fontWeight: 500, lineHeight: 1.25 },
    h2: { fontSize: '1.0625rem', fontWeight: 500, lineHeight: 1.35 },
    h3: { fontSize: '0.9375rem', fontWeight: 500 },
    button: { textTransform: 'none', fontWeight: 500 },
    overline: { letterSpacing: '0.06em', lineHeight: 1.6 },
  },
  components: {
    MuiCssBaseline: {
      styleOverrides: {
        body: { fontVariantNumeric: 'tabular-nums' },
        ':focus-visible': { outline: '2px solid var(--mui-palette-primary-main)', outlineOffset: 2 },
        '.mono': { fontFamily: MONO, fontVariantNumeric: 'tabular-nums' },
        '@media print': { 'nav, .no-print': { display: 'none !important' }, body: { background: '#FFFFFF' } },
      },
    },
    MuiPaper: { defaultProps: { elevation: 0, variant: 'outlined' } },
    MuiAppBar: { defaultProps: { elevation: 0, color: 'transparent' } },
    MuiButton: { defaultProps: { disableElevation: true, variant: 'outlined', color: 'secondary' }, styleOverrides: { root: { minHeight: 36, '@media (pointer: coarse)': { minHeight: 48 } } } },
    MuiButtonBase: { defaultProps: { disableRipple: true } },
    MuiTextField: { defaultProps: { size: 'small', fullWidth: true } },
    MuiFormControl: { defaultProps: { size: 'small' } },
    MuiLink: { defaultProps: { underline: 'always' } },
    MuiTableCell: { styleOverrides: { root: { padding: '6px 12px' }, head: { fontWeight: 500 } } },
    MuiTooltip: { defaultProps: { enterTouchDelay: 0, arrow: true } },
    MuiAlert: { defaultProps: { variant: 'outlined', icon: false } },
    MuiDialog: { defaultProps: { slotProps: { paper: { variant: 'outlined' } } } },
    MuiDataGrid: {
      defaultProps: { rowHeight: 36, columnHeaderHeight: 40, disableColumnMenu: true, disableRowSelectionOnClick: true },
      styleOverrides: { root: { border: 0, backgroundColor: 'transparent', '--DataGrid-containerBackground': 'transparent' } },
    },
  },
});
