/** Entry of the command; filled by the command's own files. */
export async function main(_args: readonly string[]): Promise<number> {
  return 0;
}
