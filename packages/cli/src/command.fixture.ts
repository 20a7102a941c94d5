/** Runs the built command as a user does. */
import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll } from 'vitest';

const BIN = fileURLToPath(new URL('../bin/tordial.mjs', import.meta.url));

export interface Ended {
  readonly exitCode: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** Runs `tordial` with the arguments; `input` goes to its standard input. */
export function tordial(args: readonly string[], { cwd = tmpdir(), input = '' }: { cwd?: string; input?: string } = {}): Promise<Ended> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [BIN, ...args], { cwd, env: { ...process.env, NO_COLOR: '1' } });
    let stdout = '';
    let stderr = '';
    child.stdout.setEncoding('utf8').on('data', (text: string) => {
      stdout += text;
    });
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      stderr += text;
    });
    child.stdin.on('error', () => undefined);
    child.stdin.end(input);
    child.on('error', reject);
    child.on('close', (exitCode) => resolve({ exitCode, stdout, stderr }));
  });
}

/** A folder of the test file's own, removed when its tests are done. */
export function scratchFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'tordial-command-'));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}
