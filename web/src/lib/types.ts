// The JSON of the API, as far as the page reads it. Units stand in the names.

export type JobState = 'queued' | 'running' | 'paused' | 'done' | 'failed' | 'cancelled'

export interface Coverage {
  estimate: number
  low: number
  high: number
  unseen: number
}

export interface MoleculeRef {
  name: string
  smiles: string
  formula: string
  key: string
}

export interface Progress {
  quenches: number
  minima: number
  coverage: Coverage
  fraction: number
  seconds_left: number
  temperature_k: number
  energy_kcal_mol: number
  lowest_energy_kcal_mol: number
  round: number
}

export interface Job {
  id: string
  state: JobState
  molecule: MoleculeRef
  field: string
  method: string
  seed: number
  settings: { window_kcal_mol: number; temperature_k: number }
  submitted: string
  progress: Progress
  /** Why it ended, in words. */
  stopped?: string
  warnings?: string[]
  error?: string
}

export interface Minimum {
  rank: number
  energy_kcal_mol: number
  relative_kcal_mol: number
  hits: number
  degeneracy: number
  symmetry_number: number
  population: number
  lowest_mode_cm1: number
  dipole_debye: number
  rotational_constants_mhz: number[]
  xyz: [number, number, number][]
}

export interface MinimaPage {
  molecule: MoleculeRef
  field: string
  elements: string[]
  coverage: Coverage
  minima: Minimum[]
  next_cursor?: string
}

export interface MoleculeInput {
  name?: string
  smiles?: string
  molfile?: string
  xyz?: string
}

export interface JobRequest {
  molecule: MoleculeInput
  field: string
  method?: string
  seed: number
  window_kcal_mol: number
  temperature_k: number
}

/** What Tarn understood of a molecule; the answer of POST /molecules. */
export interface MoleculeReport {
  name: string
  smiles: string
  key: string
  formula: string
  mass_g_mol: number
  charge: number
  atoms: number
  rotatable_bonds: number
  stereocentres: { atom: number; label: string }[]
  stereo_double_bonds: { atoms: [number, number]; label: string }[]
  /** The possible ones, where the input leaves some stereochemistry open. */
  stereoisomers?: string[]
  /** The parts of a salt or mixture. */
  fragments?: string[]
  mmff94_obstacle?: string
  notes?: string[]
}
