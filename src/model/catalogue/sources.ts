/** The published sources that entries cite, named once. */
import type { Source } from './entry.ts';

export const NNN_TEST: Source = {
  title: 'Rigorous test for quantum integrability and nonintegrability',
  reference: 'arXiv:2501.18400',
  year: 2025,
};

export const SINGLE_LAW: Source = {
  title: 'Integrability from a single conservation law in quantum spin chains',
  reference: 'arXiv:2508.20713, Phys. Rev. B 114, 055108',
  year: 2025,
};

export const CLASSIFICATION: Source = {
  title:
    'Complete classification of integrability and non-integrability for spin-1/2 chain with symmetric nearest-neighbor interaction',
  reference: 'arXiv:2411.02162',
  year: 2024,
};

export const XYZ_FIELD: Source = {
  title: 'Proof of the absence of local conserved quantities in the XYZ chain with a magnetic field',
  reference: 'arXiv:1803.02637, EPL 128, 17002',
  year: 2019,
};

export const NEXT_NEAREST: Source = {
  title: 'Absence of local conserved quantity in the Heisenberg chain with next-nearest-neighbor interaction',
  reference: 'arXiv:2403.04522',
  year: 2024,
};

export const MIXED_ISING: Source = {
  title: 'Proof of absence of local conserved quantities in the mixed-field Ising chain',
  reference: 'arXiv:2307.16703',
  year: 2023,
};

export const ZIGZAG: Source = { reference: 'arXiv:2501.15506, J. Stat. Phys. 192, 170', year: 2025 };

export const HUBBARD_COMPLETE: Source = { reference: 'arXiv:2301.03621', year: 2023 };

export const HUBBARD_ALL: Source = { reference: 'arXiv:2309.09354', year: 2023 };

export const HUBBARD_FIRST: Source = { reference: 'Phys. Rev. Lett. 56, 2453', year: 1986 };

export const CONSERVATION_LAWS: Source = {
  title: 'Structure of the conservation laws in integrable spin chains',
  reference: 'hep-th/9411045, Ann. Phys. 243, 299',
  year: 1995,
};

export const HEISENBERG_CHARGES: Source = {
  title: 'Quantum integrals of motion for the Heisenberg spin chain',
  reference: 'hep-th/9403149, Mod. Phys. Lett. A 9, 2197',
  year: 1994,
};

export const THREE_SPIN: Source = { reference: 'arXiv:1901.08078', year: 2019 };
