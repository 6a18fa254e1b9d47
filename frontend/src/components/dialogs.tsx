/** Acts that ask once more: a reason that is kept, or the password. */
import { Button, Dialog, DialogActions, DialogContent, DialogTitle, Stack, TextField, Typography } from '@mui/material';
import { useState, type ReactNode } from 'react';
import { ProblemAlert } from './states';

interface AskProps {
  title: string;
  text: ReactNode;
  label: string;
  confirm: string;
  secret?: boolean;
  /** Shortest text that may be sent. */
  least?: number;
  onClose: () => void;
  onConfirm: (text: string) => Promise<unknown>;
}

/** Asks for a text and does not close until the act has succeeded; what was typed stays when it fails. */
export function AskDialog({ title, text, label, confirm, secret = false, least = 1, onClose, onConfirm }: AskProps) {
  const [value, setValue] = useState('');
  const [error, setError] = useState<unknown>(null);
  const [busy, setBusy] = useState(false);
  const send = () => {
    setBusy(true);
    setError(null);
    onConfirm(value).then(onClose, setError).finally(() => setBusy(false));
  };
  return (
    <Dialog open onClose={onClose} fullWidth maxWidth="sm" aria-labelledby="ask-title">
      <form onSubmit={(event) => { event.preventDefault(); send(); }}>
        <DialogTitle id="ask-title">{title}</DialogTitle>
        <DialogContent>
          <Stack spacing={2}>
            <Typography component="div">{text}</Typography>
            <ProblemAlert error={error} />
            <TextField label={label} value={value} onChange={(e) => setValue(e.target.value)} type={secret ? 'password' : 'text'} autoComplete={secret ? 'current-password' : 'off'} multiline={!secret} minRows={secret ? undefined : 2} autoFocus required />
          </Stack>
        </DialogContent>
        <DialogActions>
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" variant="contained" color="primary" disabled={busy || value.trim().length < least}>{confirm}</Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
