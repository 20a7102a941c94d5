/**
 * The symbolic atom types of MMFF94 (MMFFSYMB) and the numeric type each stands for. Printed tables give the guanidine carbon CGD as 2; the
 * validation suite has it as 3, and so it is here.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Table III, and 616 (1996).
 */

// biome-ignore format: rows by element and numeric type
export const NUMERIC_TYPES = {
  // carbon
  CR: 1, 'C=C': 2, CSP2: 2, 'C=O': 3, 'C=N': 3, CGD: 3, 'C=OR': 3, 'C=ON': 3, COO: 3, COON: 3, COOO: 3, 'C=OS': 3, 'C=S': 3, 'C=SN': 3, CSO2: 3,
  'C=SO': 3, 'C=P': 3, CSP: 4, '=C=': 4, CR4R: 20, CR3R: 22, CE4R: 30, CB: 37, CO2M: 41, CS2M: 41, 'CGD+': 57, 'CNN+': 57, 'C%': 60, C5A: 63, C5B: 64,
  C5: 78, 'CIM+': 80,
  // hydrogen
  HC: 5, HSI: 5, HOR: 21, HO: 21, HOM: 21, HNR: 23, H3N: 23, HPYL: 23, HNOX: 23, HNM: 23, HN: 23, HOCO: 24, HOP: 24, 'HN=N': 27, 'HN=C': 27,
  HNCO: 28, HNCS: 28, HNCC: 28, HNCN: 28, HNNC: 28, HNNN: 28, HNSO: 28, HNPO: 28, 'HNC%': 28, HSP2: 28, HOCC: 29, HOCN: 29, HOH: 31, HOS: 33, 'HNR+': 36,
  'HIM+': 36, 'HPD+': 36, 'HNN+': 36, 'HNC+': 36, 'HGD+': 36, 'HN5+': 36, 'HO+': 50, 'HO=+': 52, HS: 71, 'HS=N': 71, HP: 71,
  // oxygen
  OR: 6, 'OC=O': 6, 'OC=C': 6, 'OC=N': 6, 'OC=S': 6, ONO2: 6, 'ON=O': 6, OSO3: 6, OSO2: 6, OSO: 6, 'OS=O': 6, '-OS': 6, OPO3: 6, OPO2: 6, OPO: 6, '-OP': 6, '-O-': 6,
  'O=C': 7, 'O=CN': 7, 'O=CR': 7, 'O=CO': 7, 'O=N': 7, 'O=S': 7, 'O=S=': 7, O2CM: 32, OXN: 32, O2N: 32, O2NO: 32, O3N: 32, 'O-S': 32, O2S: 32, O3S: 32,
  O4S: 32, OSMS: 32, OP: 32, O2P: 32, O3P: 32, O4P: 32, O4CL: 32, OM: 35, OM2: 35, 'O+': 49, 'O=+': 51, OFUR: 59, OH2: 70,
  // nitrogen
  NR: 8, 'N=C': 9, 'N=N': 9, 'NC=O': 10, 'NC=S': 10, 'NN=C': 10, 'NN=N': 10, 'NR+': 34, NPYD: 38, NPYL: 39, 'NC=C': 40, 'NC=N': 40, 'NC=P': 40, 'NC%C': 40,
  NSP: 42, NSO2: 43, NSO3: 43, NPO2: 43, NPO3: 43, 'NC%N': 43, NO2: 45, NO3: 45, 'N=O': 46, NAZT: 47, NSO: 48, '=N=': 53, 'N+=C': 54, 'N+=N': 54, 'NCN+': 55,
  'NGD+': 56, 'NPD+': 58, 'NR%': 61, NM: 62, N5A: 65, N5B: 66, N2OX: 67, N3OX: 68, NPOX: 69, N5M: 76, N5: 79, 'NIM+': 81, 'N5A+': 81, 'N5B+': 81, 'N5+': 81,
  N5AX: 82, N5BX: 82, N5OX: 82,
  // fluorine, silicon, phosphorus, sulphur, chlorine, bromine, iodine
  F: 11, SI: 19, PO4: 25, PO3: 25, PO2: 25, PO: 25, PTET: 25, P: 26, '-P=C': 75,
  S: 15, 'S=C': 16, 'S=O': 17, '>S=N': 17, SO2: 18, SO2N: 18, SO3: 18, SO4: 18, '=SO2': 18, SNO: 18, STHI: 44, 'S-P': 72, S2CM: 72, SM: 72, SSMO: 72,
  SO2M: 73, SSOM: 73, '=S=O': 74, CL: 12, CLO4: 77, BR: 13, I: 14,
  // ions
  'FE+2': 87, 'FE+3': 88, 'F-': 89, 'CL-': 90, 'BR-': 91, 'LI+': 92, 'NA+': 93, 'K+': 94, 'ZN+2': 95, 'CA+2': 96, 'CU+1': 97, 'CU+2': 98, 'MG+2': 99,
} as const;

export type SymbolicType = keyof typeof NUMERIC_TYPES;
