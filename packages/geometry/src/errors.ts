/** Where in the input a problem lies; every field is optional, all indices are 0-based except record and line (1-based, as people count). */
export interface ErrorPlace {
  readonly file?: string;
  readonly record?: number;
  readonly line?: number;
  /** Character position within the SMILES, 0-based. */
  readonly position?: number;
  readonly atom?: number;
  readonly bond?: number;
}

/** An error that the caller's input or request caused: a stable `code`, the place it concerns, and a message that says what to do. */
export class TordialError extends Error {
  override readonly name = 'TordialError';

  constructor(
    readonly code: string,
    message: string,
    readonly place: ErrorPlace = {},
    options?: ErrorOptions,
  ) {
    super(message, options);
  }
}

/** Something a reader of a result must know that stopped nothing: an open stereocentre, several fragments, a point that did not converge. */
export interface Note {
  readonly code: string;
  readonly message: string;
  readonly place?: ErrorPlace;
}
