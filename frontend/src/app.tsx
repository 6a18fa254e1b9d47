import { CssBaseline, ThemeProvider } from '@mui/material';
import { QueryClientProvider } from '@tanstack/react-query';
import { RouterProvider } from 'react-router-dom';
import { queryClient } from './api/queries';
import { SessionProvider } from './api/session';
import { router } from './routes/routes';
import { theme } from './theme/theme';

export function App() {
  return (
    <ThemeProvider theme={theme} defaultMode="system">
      <CssBaseline />
      <QueryClientProvider client={queryClient}>
        <SessionProvider><RouterProvider router={router} /></SessionProvider>
      </QueryClientProvider>
    </ThemeProvider>
  );
}
