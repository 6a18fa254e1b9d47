/** The keys: `?` lists them, `g` and a letter go to a place, `/` finds. */
import { Dialog, DialogContent, DialogTitle } from '@mui/material';
import { useEffect, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { PlainTable } from '../../components/table';
import { usePlaces } from './rail';

const isTyping = (target: EventTarget | null) => target instanceof HTMLElement && (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName));

export function Keys() {
  const places = usePlaces();
  const navigate = useNavigate();
  const [open, setOpen] = useState(false);
  useEffect(() => {
    let going = false;
    const onKey = (event: KeyboardEvent) => {
      if (isTyping(event.target) || event.ctrlKey || event.metaKey || event.altKey) return;
      const place = places.find((p) => p.key === event.key);
      if (event.key === '?') setOpen(true);
      else if (event.key === '/') {
        event.preventDefault();
        document.getElementById('find')?.focus();
      } else if (going && place !== undefined) void navigate(place.to);
      going = event.key === 'g';
    };
    document.addEventListener('keydown', onKey);
    return () => document.removeEventListener('keydown', onKey);
  }, [places, navigate]);
  const rows = [{ keys: '?', does: 'Show these keys' }, { keys: '/', does: 'Find a mark or number' }, ...places.map((p) => ({ keys: `g ${p.key}`, does: `Go to ${p.label}` })), { keys: '← →', does: 'Move a window’s end in a plot (with Shift: ten steps)' }, { keys: 'Enter', does: 'In readings: go to the next station' }];
  return (
    <Dialog open={open} onClose={() => setOpen(false)} aria-labelledby="keys-title">
      <DialogTitle id="keys-title">Keys</DialogTitle>
      <DialogContent><PlainTable label="Keys" rows={rows} keyOf={(r) => r.keys} columns={[{ title: 'Keys', cell: (r) => <kbd className="mono">{r.keys}</kbd> }, { title: 'What they do', cell: (r) => r.does }]} /></DialogContent>
    </Dialog>
  );
}
