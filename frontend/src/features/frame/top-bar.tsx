/** The top bar: the laboratory's program, the find box, and the person. */
import { found } from '@strainwright/common/contract/wire';
import { Autocomplete, Box, Button, Menu, MenuItem, TextField } from '@mui/material';
import { useColorScheme } from '@mui/material/styles';
import { useState } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import { z } from 'zod';
import { call } from '../../api/client';
import { useAct, useApi } from '../../api/queries';
import { useMay, useSession, useUser } from '../../api/session';

const answer = z.object({ items: z.array(found) });

/** Finds anything by mark, number or scanned label. */
function Find() {
  const navigate = useNavigate();
  const [text, setText] = useState('');
  const query = useApi(answer, `/api/find?q=${encodeURIComponent(text.trim())}`, { enabled: text.trim().length >= 2 });
  return (
    <Autocomplete
      freeSolo blurOnSelect clearOnBlur options={query.data?.items ?? []} filterOptions={(all) => all} inputValue={text} value={null}
      getOptionLabel={(option) => (typeof option === 'string' ? option : option.label)} groupBy={(option) => option.kind}
      onInputChange={(_event, value) => setText(value)}
      onChange={(_event, chosen) => {
        // A scanned label types the specimen's own address.
        const scanned = typeof chosen === 'string' ? /\/specimens\/[0-9a-f-]{36}/.exec(chosen)?.[0] : undefined;
        const path = scanned ?? (typeof chosen === 'string' ? query.data?.items[0] : chosen)?.path;
        setText('');
        if (path !== undefined) void navigate(path);
      }}
      renderInput={(params) => <TextField {...params} id="find" label="Find a mark or number" />} sx={{ width: { xs: '100%', sm: 320 } }} size="small"
    />
  );
}

function PersonMenu() {
  const user = useUser();
  const { signOut, reload } = useSession();
  const { mode, setMode } = useColorScheme();
  const [anchor, setAnchor] = useState<HTMLElement | null>(null);
  const other = user.decimalStyle === '.' ? ',' : '.';
  const style = useAct(() => call(z.unknown(), 'PATCH', '/api/people/me', { decimalStyle: other }), () => void reload());
  return (
    <>
      <Button variant="text" aria-haspopup="menu" aria-expanded={anchor !== null} onClick={(e) => setAnchor(e.currentTarget)}>{user.name}</Button>
      <Menu anchorEl={anchor} open={anchor !== null} onClose={() => setAnchor(null)}>
        <MenuItem disabled>{user.roles.join(', ')}</MenuItem>
        {(['light', 'dark', 'system'] as const).map((m) => <MenuItem key={m} selected={mode === m} onClick={() => setMode(m)}>{m === 'system' ? 'Colours as the system' : `${m === 'light' ? 'Light' : 'Dark'} colours`}</MenuItem>)}
        <MenuItem onClick={() => style.mutate()}>Write numbers as {other === '.' ? '1.5' : '1,5'}</MenuItem>
        <MenuItem onClick={() => void signOut()}>Sign out</MenuItem>
      </Menu>
    </>
  );
}

export function TopBar() {
  const mayFind = useMay('find.read');
  return (
    <Box component="header" sx={{ position: 'sticky', top: 0, zIndex: 6, minHeight: 56, px: 2, py: 0.75, display: 'flex', alignItems: 'center', gap: 2, flexWrap: { xs: 'wrap', sm: 'nowrap' }, bgcolor: 'background.default', borderBottom: '1px solid', borderColor: 'divider' }} className="no-print">
      <Box component={Link} to="/" sx={{ color: 'text.primary', textDecoration: 'none', fontWeight: 500, letterSpacing: '0.02em', display: 'flex', gap: 1, alignItems: 'center' }}>
        <img src="/mark.svg" width="22" height="22" alt="" />Strainwright
      </Box>
      <Box sx={{ ml: { sm: 'auto' }, order: { xs: 3, sm: 0 }, width: { xs: '100%', sm: 'auto' } }}>{mayFind && <Find />}</Box>
      <Box sx={{ ml: { xs: 'auto', sm: 0 } }}><PersonMenu /></Box>
    </Box>
  );
}
