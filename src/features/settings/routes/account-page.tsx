import { Button } from '../../../components/button';
import { Email } from '../../../components/email';
import { PageHeader, Panel } from '../../../components/panel';
import { Badge } from '../../../components/status-word';
import { ThemeSwitch } from '../../../components/theme-switch';
import { usePageTitle } from '../../../components/use-page-title';
import { useCurrentTeam, useMe } from '../../../lib/session';
import { showToast } from '../../../lib/toasts';
import { useMailResetLink } from '../api/account';
import { OwnQuota } from '../components/own-quota';
import { SessionList } from '../components/session-list';

export function Component() {
  usePageTitle('Account');
  const me = useMe();
  const team = useCurrentTeam();
  const mailLink = useMailResetLink();
  return (
    <div className="max-w-[760px]">
      <PageHeader title="Account" />
      <div className="space-y-6">
        <Panel title="You">
          <dl className="grid grid-cols-[auto_minmax(0,1fr)] gap-x-6 gap-y-2">
            <dt className="text-faded">Name</dt>
            <dd>
              {me.user.name} {me.user.isAdmin ? <Badge tone="indigo">admin</Badge> : null}
            </dd>
            <dt className="text-faded">E-mail</dt>
            <dd className="wrap-anywhere">
              <Email address={me.user.email} />
            </dd>
            <dt className="text-faded">Teams</dt>
            <dd>
              {me.memberships.length === 0
                ? 'none'
                : me.memberships.map((membership) => (
                    <p key={membership.teamId}>
                      {membership.teamName} <span className="text-faded">{membership.role}</span>{' '}
                      {membership.isDemo ? <Badge tone="weld">Invented data</Badge> : null}
                    </p>
                  ))}
            </dd>
            <dt className="text-faded">Password</dt>
            <dd>
              <Button
                size="small"
                isBusy={mailLink.isPending}
                onClick={() =>
                  mailLink.mutate(me.user.email, {
                    onSuccess: () => showToast('done', `A link to set a new password is on its way to ${me.user.email}.`),
                  })
                }
              >
                Mail me a link to change it
              </Button>
            </dd>
          </dl>
        </Panel>
        {team === null ? null : (
          <Panel title={`What you may use in ${team.teamName}`}>
            <OwnQuota teamId={team.teamId} />
          </Panel>
        )}
        <Panel title="Theme">
          <div className="max-w-80">
            <ThemeSwitch />
          </div>
        </Panel>
        <Panel title="Where you are signed in" isFlush>
          <SessionList />
        </Panel>
      </div>
    </div>
  );
}
