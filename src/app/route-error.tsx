import { isRouteErrorResponse, useRevalidator, useRouteError } from 'react-router-dom';
import { ButtonLink } from '../components/button';
import { EmptyState, ErrorState } from '../components/states';
import { ApiError } from '../lib/api-error';
import { paths } from './paths';

/** Shown in place of a page that failed; the frame around it stays. */
export function RouteError() {
  const error = useRouteError();
  const revalidator = useRevalidator();
  // 422: the id in the address is no id at all.
  const isMissing = (isRouteErrorResponse(error) || error instanceof ApiError) && (error.status === 404 || error.status === 422);
  if (isMissing) {
    return (
      <EmptyState isPage title="Nothing is kept at this address" action={<ButtonLink to={paths.home()}>Go to the unknowns</ButtonLink>}>
        It may have been removed, or it belongs to a team you are not a member of.
      </EmptyState>
    );
  }
  if (error instanceof ApiError && error.status === 403) {
    return (
      <EmptyState isPage title="This is not open to your role" action={<ButtonLink to={paths.home()}>Go to the unknowns</ButtonLink>}>
        {error.message}
      </EmptyState>
    );
  }
  return <ErrorState title="This page could not be shown" error={error} onRetry={() => void revalidator.revalidate()} />;
}
