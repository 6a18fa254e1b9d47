import { zodResolver } from '@hookform/resolvers/zod';
import { signIn as signInSchema } from '@strainwright/common/contract/people';
import { Box, Button, Link, Stack, Typography } from '@mui/material';
import { useEffect, useState } from 'react';
import { useForm } from 'react-hook-form';
import { Navigate, useLocation } from 'react-router-dom';
import type { z } from 'zod';
import { useSession } from '../../api/session';
import { FormText, showAtFields } from '../../components/fields';
import { ProblemAlert } from '../../components/states';

type Fields = z.input<typeof signInSchema>;

function cameFrom(state: unknown): string {
  return typeof state === 'object' && state !== null && 'from' in state && typeof state.from === 'string' ? state.from : '/';
}

export function SignIn() {
  const { user, signIn } = useSession();
  const location = useLocation();
  const [problem, setProblem] = useState<unknown>(null);
  const { control, handleSubmit, setError, formState } = useForm<Fields>({ resolver: zodResolver(signInSchema), defaultValues: { email: '', password: '' } });
  useEffect(() => {
    document.title = 'Sign in · Strainwright';
  }, []);
  if (user !== null && user !== undefined) return <Navigate to={cameFrom(location.state)} replace />;
  const submit = handleSubmit(async ({ email, password }) => {
    setProblem(null);
    await signIn(email, password).catch((error: unknown) => {
      setProblem(error);
      showAtFields(error, setError, ['email', 'password']);
    });
  });
  return (
    <Box component="main" sx={{ minHeight: '100vh', display: 'grid', placeItems: 'center', p: 2 }}>
      <Box component="form" onSubmit={(e) => void submit(e)} noValidate sx={{ width: '100%', maxWidth: 380, p: 4, bgcolor: 'background.paper', border: '1px solid', borderColor: 'divider', borderTop: '4px solid', borderTopColor: 'primary.main', borderRadius: 1 }}>
        <Stack spacing={2}>
          <Box>
            <Typography variant="h1">Strainwright</Typography>
            <Typography color="textSecondary">Elastic constants, from specimen to certificate</Typography>
          </Box>
          <ProblemAlert error={problem} />
          <FormText control={control} name="email" label="E-mail" type="email" autoComplete="username" autoFocus />
          <FormText control={control} name="password" label="Password" type="password" autoComplete="current-password" />
          <Button type="submit" variant="contained" color="primary" disabled={formState.isSubmitting || user === undefined}>Sign in</Button>
          <Typography variant="body2">Holding a certificate? <Link href="/verify">Verify it</Link>, no sign-in needed.</Typography>
        </Stack>
      </Box>
    </Box>
  );
}
