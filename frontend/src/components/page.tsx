/** A page: where it is, its title and state, its one main action always at the same place, then its content. */
import { Box, Link as MuiLink, Stack, Typography } from '@mui/material';
import { useEffect, type ReactNode } from 'react';
import { Link } from 'react-router-dom';

export interface Crumb { label: string; to?: string }

export function Page({ title, crumbs = [], state, action, children }: { title: string; crumbs?: readonly Crumb[]; state?: ReactNode; action?: ReactNode; children: ReactNode }) {
  useEffect(() => {
    document.title = `${title} · Strainwright`;
  }, [title]);
  return (
    <Stack spacing={3}>
      <Box>
        {crumbs.length > 0 && (
          <Box component="nav" aria-label="Where you are" sx={{ fontSize: '0.8125rem', color: 'text.secondary' }}>
            {crumbs.map((crumb, i) => (
              <span key={crumb.label}>{i > 0 && ' › '}{crumb.to === undefined ? crumb.label : <MuiLink component={Link} to={crumb.to} color="inherit">{crumb.label}</MuiLink>}</span>
            ))}
          </Box>
        )}
        <Box sx={{ display: 'flex', alignItems: 'center', flexWrap: 'wrap', gap: 2, minHeight: 48 }}>
          <Typography variant="h1" sx={{ overflowWrap: 'anywhere' }}>{title}</Typography>
          {state}
          <Box sx={{ ml: 'auto', display: 'flex', gap: 1, flexWrap: 'wrap' }} className="no-print">{action}</Box>
        </Box>
      </Box>
      {children}
    </Stack>
  );
}

/** A titled part of a page, set off by a hairline. */
export function Section({ title, action, children }: { title: string; action?: ReactNode; children: ReactNode }) {
  return (
    <Box component="section" aria-label={title} sx={{ borderTop: '1px solid', borderColor: 'divider', pt: 2 }}>
      <Box sx={{ display: 'flex', alignItems: 'center', gap: 2, mb: 1.5, flexWrap: 'wrap' }}>
        <Typography variant="h2">{title}</Typography>
        {action !== undefined && <Box sx={{ ml: 'auto', display: 'flex', gap: 1 }}>{action}</Box>}
      </Box>
      {children}
    </Box>
  );
}

/** Names beside values. */
export function Facts({ facts }: { facts: readonly (readonly [string, ReactNode])[] }) {
  return (
    <Box component="dl" sx={{ display: 'grid', gridTemplateColumns: { xs: '1fr', sm: 'max-content 1fr' }, columnGap: 3, rowGap: 0.5, m: 0 }}>
      {facts.map(([name, value]) => (
        <Box key={name} sx={{ display: 'contents' }}>
          <Typography component="dt" color="textSecondary">{name}</Typography>
          <Typography component="dd" sx={{ m: 0, overflowWrap: 'anywhere', mb: { xs: 1, sm: 0 } }}>{value}</Typography>
        </Box>
      ))}
    </Box>
  );
}
