import { Suspense } from 'react';
import { Link, Outlet, ScrollRestoration, useLocation, useNavigation } from 'react-router-dom';
import { Mark } from '../components/mark';
import { LoadingState } from '../components/states';
import { Badge } from '../components/status-word';
import { classNames } from '../lib/class-names';
import { useCurrentTeam, useMe } from '../lib/session';
import { AccountMenu } from './account-menu';
import { isAtPlace, navPlaces, type NavPlace } from './nav-places';
import { paths } from './paths';
import { SessionExpiredDialog } from './session-expired-dialog';

function RailLink({ place }: { place: NavPlace }) {
  const isCurrent = isAtPlace(place, useLocation().pathname);
  const Icon = place.icon;
  return (
    <Link
      to={place.to}
      aria-current={isCurrent ? 'page' : undefined}
      className={classNames(
        'flex min-w-0 flex-1 flex-col items-center gap-0.5 py-1.5 text-small no-underline transition-colors tablet:w-full tablet:flex-none tablet:rounded-panel tablet:py-2',
        isCurrent ? 'font-semibold text-indigo tablet:bg-indigo-wash' : 'text-faded hover:text-ink tablet:hover:bg-fold',
      )}
    >
      <Icon aria-hidden="true" className="size-5" strokeWidth={1.75} />
      <span className="max-w-full truncate">{place.label}</span>
    </Link>
  );
}

/** The frame around every page of a signed-in person: rail at the left, on a phone a bar at the foot. */
export function Component() {
  const team = useCurrentTeam();
  const isMoving = useNavigation().state !== 'idle';
  const places = navPlaces(team, useMe().abilities);
  return (
    <div className="min-h-dvh tablet:pl-[88px]">
      <a
        href="#content"
        className="sr-only z-40 rounded-panel bg-indigo px-4 py-2 text-on-indigo focus:not-sr-only focus:fixed focus:top-2 focus:left-2"
      >
        Go to the content
      </a>
      <header className="flex items-center gap-3 border-b border-seam bg-cloth px-4 py-2 tablet:fixed tablet:inset-y-0 tablet:left-0 tablet:z-20 tablet:w-[88px] tablet:flex-col tablet:border-r tablet:border-b-0 tablet:px-2 tablet:py-4">
        <Link to={paths.home()} aria-label="Isoloom" className="rounded-small">
          <Mark size={30} />
        </Link>
        <p className="min-w-0 flex-1 truncate text-table font-semibold tablet:hidden">{team?.teamName ?? 'Isoloom'}</p>
        {places.length === 0 ? null : (
          <nav
            aria-label="Places"
            className="fixed inset-x-0 bottom-0 z-20 flex h-(--foot-bar) border-t border-seam bg-cloth px-1 pb-[env(safe-area-inset-bottom)] tablet:static tablet:mt-4 tablet:h-auto tablet:w-full tablet:flex-col tablet:gap-1 tablet:border-t-0 tablet:p-0"
          >
            {places.map((place) => (
              <RailLink key={place.to} place={place} />
            ))}
          </nav>
        )}
        <div className="hidden flex-1 tablet:block" />
        <div className="hidden tablet:block">
          <AccountMenu placement="right-up" />
        </div>
        <div className="tablet:hidden">
          <AccountMenu placement="left-down" />
        </div>
      </header>
      {team?.isDemo === true ? (
        <p className="flex items-center justify-center gap-2 border-b border-seam bg-weld-wash px-4 py-1 text-center text-table">
          <Badge tone="weld">Invented data</Badge>
          <span className="hidden tablet:inline">
            {team.teamName} is a made-up laboratory to try things with. Nothing here was measured.
          </span>
        </p>
      ) : null}
      <div
        aria-hidden="true"
        className={classNames('fixed inset-x-0 top-0 z-40 h-0.5 bg-indigo transition-opacity', isMoving ? 'opacity-100' : 'opacity-0')}
      />
      <main id="content" tabIndex={-1} className="mx-auto max-w-[1520px] px-4 pt-5 pb-24 outline-none tablet:px-8 tablet:pt-7 tablet:pb-12">
        <Suspense fallback={<LoadingState />}>
          <Outlet />
        </Suspense>
      </main>
      <SessionExpiredDialog />
      <ScrollRestoration />
    </div>
  );
}
