/**
 * Compiles assembly/non-bonded.ts to WebAssembly and embeds it in src/kernel/non-bonded.generated.ts, so that no file has to be found at
 * run time. The compiler is reproducible: the same source gives the same bytes, and an unchanged file is not written again.
 *
 *   node packages/forcefield/scripts/compile-kernel.mjs
 */
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import asc from 'assemblyscript/asc';

const source = fileURLToPath(new URL('../assembly/non-bonded.ts', import.meta.url));
const product = fileURLToPath(new URL('../src/kernel/non-bonded.generated.ts', import.meta.url));

/** The TypeScript module that carries the compiled kernel. */
export async function compileKernel() {
  let binary;
  const { error, stderr } = await asc.main(
    [
      'non-bonded.ts',
      '--outFile',
      'kernel.wasm',
      '--runtime',
      'stub',
      '--enable',
      'simd',
      '-O3',
      '--converge',
      '--noAssert',
      '--importMemory',
    ],
    {
      readFile: (name) => (name === 'non-bonded.ts' ? readFileSync(source, 'utf8') : null),
      writeFile: (name, content) => {
        if (name === 'kernel.wasm') binary = content;
      },
      listFiles: () => [],
    },
  );
  if (error || !binary) throw new Error(`the kernel does not compile: ${error?.message}\n${stderr}`);
  return `// Written by scripts/compile-kernel.mjs from assembly/non-bonded.ts; do not edit.

/** The WebAssembly module of the non-bonded loop, base64. */
export const NON_BONDED_KERNEL =
  '${Buffer.from(binary).toString('base64')}';
`;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const module = await compileKernel();
  if (!existsSync(product) || readFileSync(product, 'utf8') !== module) writeFileSync(product, module);
}
