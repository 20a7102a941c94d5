/** MMFF94, or its variant for static, time-averaged structures with planar delocalised nitrogen (Halgren, J. Comput. Chem. 20, 720 (1999)). */
export type Mmff94Variant = 'MMFF94' | 'MMFF94s';
