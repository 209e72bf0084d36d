export const runSetupKeys = {
  all: ['run-setup'] as const,
  quota: (teamId: string) => [...runSetupKeys.all, 'quota', teamId] as const,
  estimate: (unknownId: string, revisionId: string) => [...runSetupKeys.all, 'estimate', unknownId, revisionId] as const,
};
