import { useQuery } from '@tanstack/react-query';
import { Badge } from '../../../components/status-word';
import { installationQuery } from '../api/installation';

const ROLE_LINES = {
  chemist: 'enters evidence, starts runs, keeps shortlists',
  lead: 'decides, manages members and quotas',
  reader: 'sees everything, changes nothing but comments',
  admin: 'people, quotas and audit of the installation',
};

/** Accounts of the invented laboratory, when the installation carries it; one click fills the form. */
export function DemoAccounts({ onPick }: { onPick: (account: { email: string; password: string }) => void }) {
  // Only a hint: while it loads, or when it fails, the page does without.
  const accounts = useQuery(installationQuery).data?.demoAccounts ?? [];
  if (accounts.length === 0) return null;
  return (
    <section aria-labelledby="demo-accounts">
      <h2 id="demo-accounts" className="flex items-center gap-2 text-table font-semibold">
        Accounts to try <Badge tone="weld">Invented data</Badge>
      </h2>
      <ul className="mt-2 divide-y divide-seam rounded-panel border border-seam bg-cloth">
        {accounts.map((account) => (
          <li key={account.email}>
            <button
              type="button"
              className="flex w-full flex-wrap items-baseline gap-x-2 px-3 py-2 text-left hover:bg-fold focus-visible:-outline-offset-2"
              onClick={() => onPick(account)}
            >
              <span className="font-semibold">{account.name}</span>
              <span className="text-table text-faded">
                {account.role}: {ROLE_LINES[account.role]}
              </span>
            </button>
          </li>
        ))}
      </ul>
    </section>
  );
}
