/** Takes files by drop or by choosing; nothing is sent from here. */
import { Box, Button, Typography } from '@mui/material';
import { useId, useState } from 'react';

const LARGEST = 200 * 1024 * 1024;

export function fileSize(bytes: number): string {
  if (bytes < 1024) return `${bytes} B`;
  return bytes < 1024 ** 2 ? `${(bytes / 1024).toFixed(1)} kB` : `${(bytes / 1024 ** 2).toFixed(1)} MB`;
}

export function FileDrop({ label, onFiles, multiple = false, hint }: { label: string; onFiles: (files: File[]) => void; multiple?: boolean; hint?: string }) {
  const id = useId();
  const [over, setOver] = useState(false);
  const [problem, setProblem] = useState('');
  const take = (list: FileList | null) => {
    const files = [...(list ?? [])].slice(0, multiple ? 20 : 1);
    const large = files.find((f) => f.size > LARGEST);
    setProblem(large === undefined ? '' : `${large.name} is larger than 200 MB`);
    if (large === undefined && files.length > 0) onFiles(files);
  };
  return (
    <Box onDragOver={(e) => { e.preventDefault(); setOver(true); }} onDragLeave={() => setOver(false)} onDrop={(e) => { e.preventDefault(); setOver(false); take(e.dataTransfer.files); }}
      sx={{ border: '1px dashed', borderColor: over ? 'primary.main' : 'divider', bgcolor: over ? 'action.hover' : 'transparent', borderRadius: 1, p: 2, display: 'flex', gap: 2, alignItems: 'center', flexWrap: 'wrap' }}>
      <Button component="label" htmlFor={id}>{label}</Button>
      <input id={id} type="file" multiple={multiple} aria-label={label} onChange={(e) => { take(e.target.files); e.target.value = ''; }} style={{ position: 'absolute', width: 1, height: 1, opacity: 0 }} />
      <Typography color={problem === '' ? 'text.secondary' : 'error'} role={problem === '' ? undefined : 'alert'}>{problem || hint || 'or drop it here'}</Typography>
    </Box>
  );
}
