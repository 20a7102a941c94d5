/** One row per atom: what the pair constants are combined from. All arrays have the same length. */
export interface VanDerWaalsAtoms {
  /** Atomic polarizability alpha, cubic angstrom. */
  readonly polarizability: Float64Array;
  /** Slater-Kirkwood effective number of valence electrons N. */
  readonly effectiveElectrons: Float64Array;
  /** Scale factor A of the minimum-energy distance, R*_ii = A alpha^(1/4). */
  readonly scaleA: Float64Array;
  /** Scale factor G of the well depth. */
  readonly scaleG: Float64Array;
  /** 0 neither, 1 hydrogen-bond donor, 2 hydrogen-bond acceptor. */
  readonly donorAcceptor: Uint8Array;
}
