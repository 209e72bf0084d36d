export const predictionKeys = {
  all: ['predictions'] as const,
  detail: (smiles: string) => [...predictionKeys.all, smiles] as const,
};
