/** Drafts that wait for a steward. */
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link, LinkButton } from '../../components/Link.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { StatusMark } from '../../components/StatusMark.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import { draftStateMark } from '../../evidence/state-marks.ts';

export function ReviewPage() {
  const reviews = useRoute(routes.listReviews);
  const drafts = reviews.data?.drafts ?? [];
  return (
    <>
      <PageHeader title="Review" lead="Drafts that wait for a decision. Whoever built a draft, or handed in an archive that it contains, leaves it to another steward." />
      <ErrorPanel error={reviews.error} />
      {reviews.isPending && <Skeleton lines={5} label="Loading what waits for review" />}
      {reviews.data && drafts.length === 0 && <EmptyState title="Nothing waits for review.">A draft appears here when its modeler submits it.</EmptyState>}
      <ul className="divide-y divide-rule border-y border-rule">
        {drafts.map((draft) => (
          <li key={draft.id} className="flex flex-wrap items-center justify-between gap-x-8 gap-y-2 py-4">
            <div className="min-w-0">
              <h2 className="text-lg"><Link to={`/drafts/${draft.id}`}>{draft.datasetTitle}, draft {draft.number}</Link></h2>
              <p className="flex flex-wrap gap-x-4 text-sm text-ink-soft"><StatusMark {...draftStateMark[draft.state]} /> by {draft.createdBy.name} in {draft.campaign}, <TimeStamp at={draft.updatedAt} /></p>
            </div>
            {draft.mayReview ? <LinkButton to={`/drafts/${draft.id}/findings`}>Review</LinkButton> : <p className="max-w-xs text-sm text-ink-soft">Not yours to decide: {draft.whyNot}.</p>}
          </li>
        ))}
      </ul>
    </>
  );
}
