import { MenuItem, TextField } from '@mui/material';
import { useSearchParams } from 'react-router-dom';

/** A filter by state, kept in the address. */
export function StateFilter({ states }: { states: readonly string[] }) {
  const [params, setParams] = useSearchParams();
  return (
    <TextField select label="State" value={params.get('state') ?? ''} sx={{ width: 180 }}
      onChange={(e) => setParams((before) => {
        const next = new URLSearchParams(before);
        if (e.target.value === '') next.delete('state');
        else next.set('state', e.target.value);
        next.delete('page');
        return next;
      })}>
      <MenuItem value="">Any</MenuItem>
      {states.map((s) => <MenuItem key={s} value={s}>{s}</MenuItem>)}
    </TextField>
  );
}
