/** The usual caution of work that can hurt someone. */
import { Alert } from '@mui/material';
import type { ReactNode } from 'react';

export function Caution({ children }: { children: ReactNode }) {
  return <Alert severity="warning" role="note"><strong>Caution.</strong> {children}</Alert>;
}
