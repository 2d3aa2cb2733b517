import { Link as RouterLink } from 'react-router-dom';
import Box from '@mui/material/Box';
import Link from '@mui/material/Link';
import { formatMoment, Loading, Panel, ProblemNotice } from '../../../components/index.js';
import { useExperimentVersions } from '../api/experiment-queries.js';

/** Every version of an experiment, newest first; an older one can be looked at and saved anew. */
export function VersionList({ experimentId, current }: { experimentId: string; current: number }) {
  const versions = useExperimentVersions(experimentId);
  return (
    <Panel title="Versions">
      {versions.isPending && <Loading what="versions" />}
      {versions.error !== null && (
        <ProblemNotice title="The versions could not be loaded" error={versions.error} />
      )}
      <Box
        component="ul"
        sx={{ m: 0, p: 0, listStyle: 'none', display: 'grid', gap: 0.5, fontSize: '0.8125rem' }}
      >
        {versions.data?.map((version) => (
          <Box component="li" key={version.version} sx={{ display: 'flex', flexWrap: 'wrap', columnGap: 2 }}>
            {version.version === current ? (
              <strong>Version {version.version}, shown</strong>
            ) : (
              <Link component={RouterLink} to={`/experiments/${experimentId}?version=${version.version}`}>
                Version {version.version}
              </Link>
            )}
            <span>
              {formatMoment(version.createdAt)}, {version.createdBy}
            </span>
            <Box component="span" sx={{ color: 'text.secondary' }}>
              {version.note}
            </Box>
          </Box>
        ))}
      </Box>
    </Panel>
  );
}
