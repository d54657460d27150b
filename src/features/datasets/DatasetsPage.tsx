/** Datasets of every campaign that the person may see; searched by title, field or campaign. */
import type { ResponseOf } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { DataTable, type Column } from '../../components/DataTable.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link } from '../../components/Link.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';

type Row = ResponseOf<typeof routes.listDatasets>['datasets'][number];

const columns: Column<Row>[] = [
  { id: 'title', header: 'Dataset', value: (row) => row.title, cell: (row) => <Link to={`/campaigns/${row.campaign}/datasets/${row.slug}`}>{row.title}</Link> },
  { id: 'campaign', header: 'Campaign', value: (row) => row.campaign, cell: (row) => <Link to={`/campaigns/${row.campaign}`}>{row.campaign}</Link> },
  { id: 'fields', header: 'Fields', value: (row) => row.fields.join(', ') },
  { id: 'release', header: 'Release', numeric: true, value: (row) => row.latestRelease?.version ?? 0, text: (row) => (row.latestRelease ? String(row.latestRelease.version) : 'none') },
  { id: 'rows', header: 'Rows', numeric: true, value: (row) => row.latestRelease?.rows ?? 0, text: (row) => (row.latestRelease ? String(row.latestRelease.rows) : '') },
  { id: 'columns', header: 'Columns', numeric: true, value: (row) => row.latestRelease?.columns ?? 0, text: (row) => (row.latestRelease ? String(row.latestRelease.columns) : '') },
  { id: 'at', header: 'Released', value: (row) => row.latestRelease?.releasedAt ?? '', cell: (row) => (row.latestRelease ? <TimeStamp at={row.latestRelease.releasedAt} /> : null) },
  { id: 'drafts', header: 'Open drafts', numeric: true, value: (row) => row.openDrafts },
];

export function DatasetsPage() {
  const datasets = useRoute(routes.listDatasets, {}, {});
  return (
    <>
      <PageHeader title="Datasets" lead="Matrices that were built from archives by a recipe. A release is a version that a steward approved; it never changes." />
      <ErrorPanel error={datasets.error} />
      {datasets.isPending && <Skeleton lines={8} label="Loading the datasets" />}
      {datasets.data?.datasets.length === 0 && <EmptyState title="No dataset yet.">Open a campaign and begin one from its archives.</EmptyState>}
      {datasets.data && datasets.data.datasets.length > 0 && <DataTable caption="Datasets" columns={columns} rows={datasets.data.datasets} rowId={(row) => row.id} fileName="datasets" />}
    </>
  );
}
