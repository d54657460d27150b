/** The archives of a campaign as a table. */
import { useOutletContext } from 'react-router-dom';
import type { ArchiveSummary } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { DataTable, type Column } from '../../components/DataTable.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link, LinkButton } from '../../components/Link.tsx';
import { bytesText, quantityText } from '../../components/number-format.ts';
import { SeverityCounts } from '../../components/SeverityCounts.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { StatusMark } from '../../components/StatusMark.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import type { CampaignOutlet } from './CampaignPage.tsx';

const states = {
  checking: { kind: 'working', label: 'being checked' },
  checked: { kind: 'sound', label: 'checked' },
  unreadable: { kind: 'blocker', label: 'unreadable' },
  withdrawn: { kind: 'off', label: 'withdrawn' },
} as const;

const columns: Column<ArchiveSummary>[] = [
  { id: 'name', header: 'Archive', value: (row) => row.name, cell: (row) => <Link to={`/archives/${row.id}`}>{row.name}</Link> },
  { id: 'run', header: 'Run', value: (row) => row.run },
  { id: 'state', header: 'State', value: (row) => row.state, cell: (row) => <StatusMark {...states[row.state]} /> },
  { id: 'findings', header: 'Findings', value: (row) => row.findings.blocker * 1e6 + row.findings.caution * 1e3 + row.findings.note, text: (row) => `${row.findings.blocker} blockers, ${row.findings.caution} cautions, ${row.findings.note} notes`, cell: (row) => <SeverityCounts counts={row.findings} /> },
  { id: 'snapshots', header: 'Snapshots', numeric: true, value: (row) => row.snapshots ?? 0, text: (row) => (row.snapshots === null ? '' : String(row.snapshots)) },
  { id: 'nodes', header: 'Nodes', numeric: true, value: (row) => row.nodes ?? 0, text: (row) => (row.nodes === null ? '' : String(row.nodes)) },
  { id: 'time', header: 'Time', numeric: true, value: (row) => row.timeFrom ?? 0, text: (row) => (row.timeFrom === null ? '' : `${quantityText(row.timeFrom)} to ${quantityText(row.timeTo ?? row.timeFrom)}`) },
  { id: 'bytes', header: 'Size', numeric: true, value: (row) => row.bytes, text: (row) => bytesText(row.bytes) },
  { id: 'by', header: 'Handed in by', value: (row) => row.createdBy.name },
  { id: 'at', header: 'When', value: (row) => row.createdAt, cell: (row) => <TimeStamp at={row.createdAt} /> },
];

export function CampaignArchives() {
  const { campaign } = useOutletContext<CampaignOutlet>();
  const archives = useRoute(routes.listArchives, { campaign: campaign.slug }, { limit: 1000 }, { refetchInterval: (query) => (query.state.data?.archives.some((archive) => archive.state === 'checking') ? 2000 : false) });
  if (archives.error) return <ErrorPanel error={archives.error} />;
  if (!archives.data) return <Skeleton lines={8} label="Loading the archives" />;
  if (archives.data.total === 0) {
    return (
      <EmptyState title="No archive yet.">
        A simulation group hands in HDF5 or NPY files here; each is verified, read and checked. <LinkButton to={`/campaigns/${campaign.slug}/hand-in`}>Hand in an archive</LinkButton>
      </EmptyState>
    );
  }
  return <DataTable caption="Archives" columns={columns} rows={archives.data.archives} rowId={(row) => row.id} fileName={`${campaign.slug}-archives`} />;
}
