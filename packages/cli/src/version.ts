/** Version of the package; a test holds it to the manifest's. */
export const VERSION = '0.1.0';
