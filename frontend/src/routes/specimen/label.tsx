import { specimen as specimenSchema } from '@strainwright/common/contract/specimens';
import { Box, Button, Typography } from '@mui/material';
import { QRCodeSVG } from 'qrcode.react';
import { useParams } from 'react-router-dom';
import { useApi } from '../../api/queries';
import { Page } from '../../components/page';
import { Loaded } from '../../components/states';

/** A label to print and stick on: the mark, and a code to scan into the find box. */
export function Label() {
  const { id = '' } = useParams();
  return (
    <Loaded query={useApi(specimenSchema, `/api/specimens/${id}`)}>
      {(s) => (
        <Page title={`Label of ${s.mark}`} crumbs={[{ label: s.orderNumber, to: `/orders/${s.orderId}` }, { label: s.mark, to: `/specimens/${s.id}` }]} action={<Button variant="contained" color="primary" onClick={() => print()}>Print</Button>}>
          <Box sx={{ width: '62mm', height: '29mm', border: '1px solid #1C2430', p: '2mm', display: 'flex', gap: '3mm', alignItems: 'center', bgcolor: '#FFFFFF', color: '#1C2430' }}>
            <QRCodeSVG value={`${location.origin}/specimens/${s.id}`} size={84} title={`Code of ${s.mark}`} />
            <Box sx={{ minWidth: 0 }}>
              <Typography className="mono" sx={{ fontSize: '6mm', fontWeight: 500, lineHeight: 1.1 }}>{s.mark}</Typography>
              <Typography className="mono" sx={{ fontSize: '3mm' }}>{s.orderNumber}</Typography>
              <Typography sx={{ fontSize: '2.8mm', overflow: 'hidden', textOverflow: 'ellipsis' }}>{s.material}</Typography>
            </Box>
          </Box>
        </Page>
      )}
    </Loaded>
  );
}
