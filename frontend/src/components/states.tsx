/** The four ways a page can be without its content: loading, failed, empty, forbidden. */
import { Alert, Box, Button, Skeleton, Stack, Typography } from '@mui/material';
import type { UseQueryResult } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { ApiProblem } from '../api/client';

export function LoadingState({ label = 'Loading' }: { label?: string }) {
  return (
    <Stack role="status" aria-label={label} spacing={1} sx={{ py: 2 }}>
      {[70, 100, 100, 85].map((width, i) => <Skeleton key={i} variant="rounded" height={28} width={`${width}%`} />)}
    </Stack>
  );
}

export function FailedState({ error, retry }: { error: unknown; retry?: () => void }) {
  if (error instanceof ApiProblem && error.status === 403) return <ForbiddenState />;
  const text = error instanceof Error ? error.message : 'Something went wrong.';
  return (
    <Alert severity="error" action={retry === undefined ? undefined : <Button onClick={retry}>Try again</Button>}>
      <strong>Could not load this.</strong> {text}
    </Alert>
  );
}

export function ForbiddenState() {
  return <Alert severity="warning"><strong>Not for your roles.</strong> Ask an administrator if you need to see this.</Alert>;
}

export function EmptyState({ title, children }: { title: string; children?: ReactNode }) {
  return (
    <Box sx={{ py: 4, px: 2, textAlign: 'center', border: '1px dashed', borderColor: 'divider', borderRadius: 1 }}>
      <Typography variant="h3" component="p">{title}</Typography>
      {children !== undefined && <Typography color="textSecondary" component="div">{children}</Typography>}
    </Box>
  );
}

/** Shows what a query has, or why it has nothing yet. */
export function Loaded<T>({ query, children }: { query: UseQueryResult<T>; children: (data: T) => ReactNode }) {
  if (query.data !== undefined) return <>{children(query.data)}</>;
  if (query.isError) return <FailedState error={query.error} retry={() => void query.refetch()} />;
  return <LoadingState />;
}

/** What a failed act says, beside its form. */
export function ProblemAlert({ error }: { error: unknown }) {
  if (error === null || error === undefined) return null;
  const text = error instanceof Error ? error.message : 'Something went wrong.';
  return <Alert severity="error" role="alert">{text}</Alert>;
}
