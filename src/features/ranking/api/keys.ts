export const explanationKeys = {
  all: ['explanations'] as const,
  detail: (runId: string, smiles: string) => [...explanationKeys.all, runId, smiles] as const,
};
