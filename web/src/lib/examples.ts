// Molecules a fragrance laboratory would try first; structures as in any handbook of odorants.
export const examples = [
  { name: 'muscone', smiles: 'C[C@@H]1CCCCCCCCCCCCC(=O)C1' },
  { name: 'menthol', smiles: 'C[C@@H]1CC[C@H]([C@@H](C1)O)C(C)C' },
  { name: 'linalool', smiles: 'CC(C)=CCC[C@](C)(O)C=C' },
  { name: 'pentadecanolide', smiles: 'O=C1CCCCCCCCCCCCCCO1' },
]
