import { WORK_KINDS, worklist } from '@strainwright/common/contract/worklist';
import { Box, Link as MuiLink, Stack, Typography } from '@mui/material';
import { Link } from 'react-router-dom';
import { useApi } from '../../api/queries';
import { useUser } from '../../api/session';
import { showDay, showInstant } from '../../components/moments';
import { Page, Section } from '../../components/page';
import { EmptyState, Loaded } from '../../components/states';

/** What waits for this person now; one click to the thing itself. */
export function Worklist() {
  const user = useUser();
  const query = useApi(worklist, '/api/worklist');
  return (
    <Page title="Worklist">
      <Loaded query={query}>
        {({ items }) => items.length === 0 ? <EmptyState title="Nothing waits for you">Work for {user.roles.join(', ')} appears here by itself.</EmptyState> : (
          <>{WORK_KINDS.filter((kind) => items.some((i) => i.kind === kind)).map((kind) => {
            const own = items.filter((i) => i.kind === kind);
            return (
              <Section key={kind} title={`${kind.charAt(0).toUpperCase()}${kind.slice(1)} (${own.length})`}>
                <Stack component="ul" sx={{ listStyle: 'none', m: 0, p: 0 }}>
                  {own.map((item) => (
                    <Box component="li" key={item.path + item.id} sx={{ display: 'flex', gap: 2, flexWrap: 'wrap', py: 0.75, borderBottom: '1px solid', borderColor: 'divider' }}>
                      <MuiLink component={Link} to={item.path} className="mono" sx={{ minWidth: 140 }}>{item.label}</MuiLink>
                      <Typography sx={{ flex: 1, minWidth: 200 }}>{item.detail}</Typography>
                      <Typography color="textSecondary">{item.dueOn !== null ? `due ${showDay(item.dueOn)}` : item.since !== null ? `since ${showInstant(item.since)}` : ''}</Typography>
                    </Box>
                  ))}
                </Stack>
              </Section>
            );
          })}</>
        )}
      </Loaded>
    </Page>
  );
}
