import { useState } from 'react';
import Box from '@mui/material/Box';
import Button from '@mui/material/Button';
import { Loading, Notice, Page, Panel, ProblemNotice } from '../../components/index.js';
import { useObstacle } from '../auth/index.js';
import { AddPerson } from './add-person.js';
import { useUsers } from './api/users.js';
import { PersonRow } from './person-row.js';

/** People and their roles, for the administrator. */
export function PeoplePage() {
  const obstacle = useObstacle('people.manage');
  return (
    <Page title="People">
      {obstacle === null ? (
        <People />
      ) : (
        <Notice kind="plain" title="People are managed by the administrator">
          {obstacle}
        </Notice>
      )}
    </Page>
  );
}

function People() {
  const users = useUsers();
  const [isAdding, setAdding] = useState(false);
  return (
    <>
      {isAdding && <AddPerson onClose={() => setAdding(false)} />}
      <Panel
        title="Accounts"
        isFlush
        actions={!isAdding && <Button onClick={() => setAdding(true)}>Add person</Button>}
      >
        {users.isPending && (
          <Box sx={{ p: 1.5 }}>
            <Loading what="people" />
          </Box>
        )}
        {users.error !== null && (
          <ProblemNotice
            title="The people could not be loaded"
            error={users.error}
            onRetry={() => void users.refetch()}
          />
        )}
        <Box component="ul" sx={{ m: 0, p: 0, listStyle: 'none' }}>
          {users.data?.map((user) => (
            <PersonRow key={user.account} user={user} />
          ))}
        </Box>
      </Panel>
    </>
  );
}
