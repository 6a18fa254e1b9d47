import { verification, type Verification } from '@strainwright/common/contract/certificates';
import { Alert, Box, Button, Link, Stack, TextField, Typography } from '@mui/material';
import { useMutation } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { useParams, useSearchParams } from 'react-router-dom';
import { call } from '../../api/client';
import { FileDrop } from '../../components/file-drop';
import { showInstant } from '../../components/moments';
import { Facts } from '../../components/page';
import { StateWord } from '../../components/state-word';
import { ProblemAlert } from '../../components/states';

/** Open to anyone who holds a certificate: is it the one the laboratory issued, and does it still stand? */
export function Verify() {
  const { number: given = '' } = useParams();
  const [params] = useSearchParams();
  const [number, setNumber] = useState(given);
  const [code, setCode] = useState(params.get('code') ?? '');
  const issue = params.get('issue');
  const byCode = useMutation({ mutationFn: () => call(verification, 'GET', `/api/verify/${encodeURIComponent(number.trim())}?code=${encodeURIComponent(code.trim())}${issue === null ? '' : `&issue=${issue}`}`) });
  const byFile = useMutation({ mutationFn: (file: File) => {
    const form = new FormData();
    form.append('file', file, file.name);
    return call(verification, 'POST', '/api/verify', form);
  } });
  const { mutate } = byCode;
  useEffect(() => {
    document.title = 'Verify a certificate · Strainwright';
    if (given !== '' && params.get('code') !== null) mutate();
  }, [given, params, mutate]);
  const latest = byFile.data ?? byCode.data;
  return (
    <Box component="main" sx={{ maxWidth: 720, mx: 'auto', p: { xs: 2, sm: 4 } }}>
      <Stack spacing={3}>
        <Typography variant="h1">Verify a certificate</Typography>
        <ProblemAlert error={byCode.error ?? byFile.error} />
        {latest !== undefined && <Verdict verification={latest} />}
        <Stack component="form" spacing={2} onSubmit={(e) => { e.preventDefault(); byFile.reset(); byCode.mutate(); }}>
          <Typography variant="h2">By number and code</Typography>
          <TextField label="Certificate number" value={number} onChange={(e) => setNumber(e.target.value)} placeholder="C-2026-0001" slotProps={{ htmlInput: { className: 'mono' } }} required />
          <TextField label="Verification code" value={code} onChange={(e) => setCode(e.target.value)} helperText="Printed beside the square code on the certificate" slotProps={{ htmlInput: { className: 'mono' } }} required />
          <Box><Button type="submit" variant="contained" color="primary" disabled={byCode.isPending || number.trim() === '' || code.trim() === ''}>Verify</Button></Box>
        </Stack>
        <Stack spacing={2}>
          <Typography variant="h2">By file</Typography>
          <FileDrop label="Choose the PDF, spreadsheet or data file" hint="or drop it here; it is compared and not kept" onFiles={([file]) => { byCode.reset(); if (file !== undefined) byFile.mutate(file); }} />
        </Stack>
        <Link href="/sign-in">Sign in</Link>
      </Stack>
    </Box>
  );
}

function Verdict({ verification: v }: { verification: Verification }) {
  const severity = v.verdict === 'genuine and current' ? 'success' : v.verdict === 'genuine but superseded' ? 'warning' : 'error';
  return (
    <Alert severity={severity} role="status">
      <Typography variant="h2" component="p"><StateWord state={v.verdict} /></Typography>
      <Typography>{v.explanation}</Typography>
      {v.number !== null && <Facts facts={[['Number', <span key="n" className="mono">{v.number}</span>], ['Issue', String(v.issue)], ['Laboratory', v.laboratory ?? '–'], ['Released', showInstant(v.releasedAt)], ...(v.replacedBy === null ? [] : [['Replaced by', `issue ${v.replacedBy.issue} of ${showInstant(v.replacedBy.releasedAt)}`] as const]), ...(v.withdrawal === null ? [] : [['Withdrawn', `${showInstant(v.withdrawal.at)}: ${v.withdrawal.reason}`] as const])]} />}
    </Alert>
  );
}
