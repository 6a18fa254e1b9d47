/** The frame around every page of a signed-in person. */
import { Alert, Box, Link } from '@mui/material';
import { Suspense, useEffect, useState } from 'react';
import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { useLiveUpdates } from '../../api/live';
import { useSession } from '../../api/session';
import { LoadingState } from '../../components/states';
import { Keys } from './keys';
import { Rail } from './rail';
import { TopBar } from './top-bar';

function useOnline(): boolean {
  const [online, setOnline] = useState(navigator.onLine);
  useEffect(() => {
    const update = () => setOnline(navigator.onLine);
    addEventListener('online', update);
    addEventListener('offline', update);
    return () => {
      removeEventListener('online', update);
      removeEventListener('offline', update);
    };
  }, []);
  return online;
}

export function Frame() {
  const { user } = useSession();
  const location = useLocation();
  const online = useOnline();
  useLiveUpdates(user !== null && user !== undefined);
  if (user === undefined) return <Box sx={{ p: 4 }}><LoadingState label="Signing in" /></Box>;
  if (user === null) return <Navigate to="/sign-in" state={{ from: location.pathname + location.search }} replace />;
  return (
    <>
      <Link href="#content" sx={{ position: 'absolute', left: -9999, '&:focus': { left: 8, top: 8, zIndex: 10, bgcolor: 'background.paper', p: 1 } }}>Skip to content</Link>
      <TopBar />
      {!online && <Alert severity="warning">No network. What you type is kept on this machine.</Alert>}
      <Box sx={{ display: 'flex', maxWidth: 1440 }}>
        <Rail />
        <Box component="main" id="content" tabIndex={-1} sx={{ flex: 1, minWidth: 0, p: { xs: 2, md: 3 }, pb: { xs: 10, sm: 3 }, outline: 'none' }}>
          <Suspense fallback={<LoadingState />}><Outlet /></Suspense>
        </Box>
      </Box>
      <Keys />
    </>
  );
}
