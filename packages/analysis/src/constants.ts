/**
 * Physical constants and unit conversions.
 *
 * h, k, N_A, c and the calorie are exact (SI brochure, 9th edition 2019; thermochemical calorie 4.184 J); the atomic mass
 * constant is CODATA 2018 (Tiesinga, Mohr, Newell and Taylor, Rev. Mod. Phys. 93, 025010 (2021)).
 */
import { perKcal } from '@tordial/scan';

/** Planck constant, J s. */
export const PLANCK = 6.62607015e-34;
/** Boltzmann constant, J/K. */
export const BOLTZMANN = 1.380649e-23;
/** Avogadro constant, 1/mol. */
export const AVOGADRO = 6.02214076e23;
/** Speed of light, m/s. */
export const SPEED_OF_LIGHT = 299792458;
/** Atomic mass constant, kg. */
export const ATOMIC_MASS = 1.6605390666e-27;

/** Joule in a thermochemical calorie, and so kJ in a kcal. */
export const JOULE_PER_CALORIE = perKcal('kJ/mol');
/** Molar gas constant, J/mol/K. */
export const GAS_CONSTANT = BOLTZMANN * AVOGADRO;
/** Molar gas constant, kcal/mol/K. */
export const GAS_CONSTANT_KCAL = GAS_CONSTANT / (1000 * JOULE_PER_CALORIE);
/** Frequency of an attempt per kelvin, k/h in 1/s/K: the prefactor of the Eyring equation over the temperature. */
export const ATTEMPTS_PER_KELVIN = BOLTZMANN / PLANCK;
/** Boltzmann constant in wavenumbers, cm-1/K. */
export const BOLTZMANN_WAVENUMBER = BOLTZMANN / (100 * PLANCK * SPEED_OF_LIGHT);
/** Wavenumbers in one kcal/mol: energy over N_A h c, cm-1. */
export const WAVENUMBER_PER_KCAL = (1000 * JOULE_PER_CALORIE) / (AVOGADRO * 100 * PLANCK * SPEED_OF_LIGHT);
/** Rotational constant B = h / (8 pi^2 c I) in cm-1 of a moment of inertia of 1 amu angstrom^2. */
export const ROTATIONAL_WAVENUMBER = PLANCK / (8 * Math.PI ** 2 * 100 * SPEED_OF_LIGHT * ATOMIC_MASS * 1e-20);
/** Harmonic wavenumber in cm-1 of a mass-weighted force constant of 1 kcal/mol/angstrom^2/amu: sqrt(lambda) / (2 pi c). */
export const WAVENUMBER_OF_FORCE =
  Math.sqrt((1000 * JOULE_PER_CALORIE) / (AVOGADRO * 1e-20 * ATOMIC_MASS)) / (2 * Math.PI * 100 * SPEED_OF_LIGHT);
/** Zero of the Celsius scale, K. */
export const CELSIUS_ZERO = 273.15;
/** Radians in a degree. */
export const DEGREE = Math.PI / 180;
