/** Findings gathered with a count; each says what was seen, why it matters and what to do. */
import type { Finding } from '@strainwright/common/contract/result';
import { Box, Stack, Typography } from '@mui/material';
import type { ReactNode } from 'react';
import { StateWord } from './state-word';

const ORDER = ['stop', 'warn', 'note'] as const;

export function findingsSummary(findings: readonly Finding[]): string {
  if (findings.length === 0) return 'No findings';
  return ORDER.flatMap((severity) => {
    const n = findings.filter((f) => f.severity === severity).length;
    return n === 0 ? [] : [`${n} ${severity}${n === 1 ? '' : 's'}`];
  }).join(', ');
}

/** @param beside what to show with a finding: a field for the reason, say */
export function FindingsList({ findings, title = 'Findings', beside }: { findings: readonly Finding[]; title?: string; beside?: (finding: Finding) => ReactNode }) {
  const sorted = [...findings].sort((a, b) => ORDER.indexOf(a.severity) - ORDER.indexOf(b.severity));
  return (
    <Box component="section" aria-label={title}>
      <Typography variant="h2" sx={{ mb: 1 }}>{title}: {findingsSummary(findings)}</Typography>
      <Stack component="ul" spacing={1} sx={{ listStyle: 'none', m: 0, p: 0 }}>
        {sorted.map((f, i) => (
          <Box component="li" key={`${f.code} ${f.subject} ${i}`} sx={{ borderLeft: '3px solid', borderColor: f.severity === 'stop' ? 'error.main' : f.severity === 'warn' ? 'warning.main' : 'info.main', pl: 1.5 }}>
            <StateWord state={f.severity} /> <strong>{f.seen}</strong>
            <Typography variant="body2" color="textSecondary">{f.why}. {f.action}.</Typography>
            {beside?.(f)}
          </Box>
        ))}
      </Stack>
    </Box>
  );
}
