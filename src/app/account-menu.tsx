import { Check, ClipboardList, LogOut, ShieldCheck, UserRound } from 'lucide-react';
import { NavLink, useNavigate } from 'react-router-dom';
import { Menu, menuItemClass } from '../components/menu';
import { Badge } from '../components/status-word';
import { ThemeSwitch } from '../components/theme-switch';
import { useSignOut } from '../features/session/api/use-sign-out';
import { rememberTeam, useCurrentTeam, useMe } from '../lib/session';
import { paths } from './paths';

const initials = (name: string) =>
  name
    .split(/\s+/)
    .filter((part) => part !== '')
    .map((part) => part.charAt(0).toUpperCase())
    .filter((_, index, all) => index === 0 || index === all.length - 1)
    .join('');

/** Who is signed in, the team shown, administration, theme and the way out. */
export function AccountMenu({ placement }: { placement: 'right-up' | 'left-down' }) {
  const me = useMe();
  const team = useCurrentTeam();
  const navigate = useNavigate();
  const signOut = useSignOut();
  return (
    <Menu
      label={`Account of ${me.user.name}`}
      placement={placement}
      triggerClassName="flex size-9 items-center justify-center rounded-full border border-selvage bg-cloth text-table font-semibold hover:bg-fold"
      trigger={initials(me.user.name)}
    >
      {(close) => (
        <>
          <div className="border-b border-seam px-3 pt-1 pb-2">
            <p className="truncate font-semibold">{me.user.name}</p>
            <p className="truncate text-small text-faded">{me.user.email}</p>
          </div>
          {me.memberships.length > 1 ? (
            <div role="group" aria-label="Team" className="border-b border-seam py-1">
              <p className="px-3 pt-1 text-small text-faded">Team</p>
              {me.memberships.map((membership) => (
                <button
                  key={membership.teamId}
                  type="button"
                  className={menuItemClass}
                  aria-pressed={membership.teamId === team?.teamId}
                  onClick={() => {
                    rememberTeam(membership.teamId);
                    close();
                    void navigate(paths.unknowns(membership.teamId));
                  }}
                >
                  <Check
                    aria-hidden="true"
                    className={membership.teamId === team?.teamId ? 'size-4 shrink-0 text-indigo' : 'invisible size-4 shrink-0'}
                  />
                  <span className="min-w-0 flex-1 truncate">{membership.teamName}</span>
                  {membership.isDemo ? <Badge tone="weld">Invented</Badge> : null}
                </button>
              ))}
            </div>
          ) : null}
          <div className="border-b border-seam py-1">
            <NavLink to={paths.account()} className={menuItemClass} onClick={close}>
              <UserRound aria-hidden="true" className="size-4 text-faded" />
              Account and sessions
            </NavLink>
            {me.abilities.manageUsers ? (
              <NavLink to={paths.adminPeople()} className={menuItemClass} onClick={close}>
                <ShieldCheck aria-hidden="true" className="size-4 text-faded" />
                People of the installation
              </NavLink>
            ) : null}
            {me.abilities.readAudit ? (
              <NavLink to={paths.adminAudit()} className={menuItemClass} onClick={close}>
                <ClipboardList aria-hidden="true" className="size-4 text-faded" />
                Audit
              </NavLink>
            ) : null}
          </div>
          <div className="border-b border-seam px-3 py-2">
            <ThemeSwitch />
          </div>
          <div className="pt-1">
            <button type="button" className={menuItemClass} disabled={signOut.isPending} onClick={() => signOut.mutate()}>
              <LogOut aria-hidden="true" className="size-4 text-faded" />
              Sign out
            </button>
          </div>
        </>
      )}
    </Menu>
  );
}
