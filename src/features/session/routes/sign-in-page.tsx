import { useState } from 'react';
import { Link, useNavigate, useSearchParams } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Panel } from '../../../components/panel';
import { usePageTitle } from '../../../components/use-page-title';
import { DemoAccounts } from '../components/demo-accounts';
import { EntryLayout } from '../components/entry-layout';
import { SignInForm } from '../components/sign-in-form';

/** Only addresses of this site: `//host` would leave it. */
const isOwnPath = (path: string) => path.startsWith('/') && !path.startsWith('//') && !path.includes('\\');

export function Component() {
  usePageTitle('Sign in');
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const [picked, setPicked] = useState<{ email: string; password: string } | null>(null);
  const next = search.get('next') ?? '/';
  return (
    <EntryLayout title="Sign in" lead="Every constitution that fits, ranked against what was measured.">
      <Panel>
        <SignInForm
          key={picked?.email}
          {...(picked === null ? {} : { initial: picked })}
          onSignedIn={() => void navigate(isOwnPath(next) ? next : '/', { replace: true })}
          aside={
            <Link to={paths.requestReset()} className="text-table text-indigo">
              Forgot the password?
            </Link>
          }
        />
      </Panel>
      <DemoAccounts onPick={setPicked} />
    </EntryLayout>
  );
}
