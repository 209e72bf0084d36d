import { redirect, type LoaderFunctionArgs } from 'react-router-dom';
import { ApiError } from '../lib/api-error';
import { queryClient } from '../lib/query-client';
import { meQuery, pickMembership } from '../lib/session';
import { paths } from './paths';

/** Loads the signed-in person, or goes to the sign-in page and comes back afterwards. */
export async function requireSession({ request }: LoaderFunctionArgs) {
  try {
    await queryClient.ensureQueryData(meQuery);
    return null;
  } catch (error) {
    if (!(error instanceof ApiError) || error.status !== 401) throw error;
    const url = new URL(request.url);
    throw redirect(paths.signIn(url.pathname + url.search));
  }
}

/** `/` shows the unknowns of the current team; without a team, the account. */
export async function goHome() {
  const membership = pickMembership(await queryClient.ensureQueryData(meQuery));
  return redirect(membership === null ? paths.team() : paths.unknowns(membership.teamId));
}
