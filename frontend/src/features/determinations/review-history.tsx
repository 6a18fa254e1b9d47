import type { Determination } from '@strainwright/common/contract/determinations';
import { Typography } from '@mui/material';
import { showInstant } from '../../components/moments';
import { PlainTable } from '../../components/table';

/** Decisions so far, with their reasons. */
export function ReviewHistory({ determination }: { determination: Determination }) {
  if (determination.reviews.length === 0) return <Typography color="textSecondary">Not reviewed yet.</Typography>;
  return <PlainTable label="Reviews" rows={determination.reviews} keyOf={(r) => r.id} columns={[{ title: 'Decision', cell: (r) => (r.decision === 'accept' ? 'accepted' : 'returned') }, { title: 'By', cell: (r) => `${r.personName}, ${showInstant(r.at)}` }, { title: 'Reason', cell: (r) => r.reason || '–' }]} />;
}
