import { Box } from '@mui/material';
import { useRouteError } from 'react-router-dom';
import { FailedState } from '../../components/states';

/** A page that could not be shown at all. */
export function PageFailed() {
  const error = useRouteError();
  return <Box component="main" sx={{ p: 4, maxWidth: 720 }}><FailedState error={error} retry={() => globalThis.location.reload()} /></Box>;
}
