/** Runs a program by its argument list, without a shell, feeds it text and collects what it prints. */
import { spawn } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { resolve as absolute, join } from 'node:path';
import { TordialError } from '@tordial/geometry';

export interface CommandOutcome {
  readonly exitCode: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

/** Largest answer that is collected, characters. */
const LONGEST_ANSWER = 64 * 1024 * 1024;

/**
 * Resolves when the program has ended, whatever its exit code. Throws `engine/missing` when it cannot be started, `engine/timeout` when
 * it takes longer than `timeout` seconds (it is killed, its children with it), `engine/answer` when it prints without end.
 */
export function runCommand(command: readonly string[], input: string, timeout: number, signal?: AbortSignal): Promise<CommandOutcome> {
  // programs leave files where they run: each run has a folder of its own, and words that name files here still name them there
  const [program, ...args] = command.map((word) => (existsSync(word) ? absolute(word) : word));
  const folder = mkdtempSync(join(tmpdir(), 'tordial-run-'));
  return run(program, args, folder, input, timeout, signal).finally(() => rmSync(folder, { recursive: true, force: true, maxRetries: 3 }));
}

function run(
  program: string,
  args: readonly string[],
  folder: string,
  input: string,
  timeout: number,
  signal: AbortSignal | undefined,
): Promise<CommandOutcome> {
  return new Promise((resolve, reject) => {
    // a group of its own, so that ending it ends what it started
    const child = spawn(program, args, { cwd: folder, detached: process.platform !== 'win32', stdio: ['pipe', 'pipe', 'pipe'] });
    let stdout = '';
    let stderr = '';
    const kill = (): void => {
      if (child.pid === undefined) return;
      try {
        process.kill(process.platform === 'win32' ? child.pid : -child.pid, 'SIGKILL');
      } catch {
        child.kill('SIGKILL');
      }
    };
    const fail = (error: Error): void => {
      clearTimeout(timer);
      signal?.removeEventListener('abort', abort);
      kill();
      reject(error);
    };
    const abort = (): void => fail(signal?.reason instanceof Error ? signal.reason : new Error('aborted'));
    const timer = setTimeout(
      () =>
        fail(
          new TordialError(
            'engine/timeout',
            `the engine ${program} did not answer within ${timeout} s; raise "timeout" in its configuration`,
          ),
        ),
      timeout * 1000,
    );
    if (signal?.aborted) return abort();
    signal?.addEventListener('abort', abort, { once: true });
    child.stdout.setEncoding('utf8').on('data', (text: string) => {
      stdout += text;
      if (stdout.length > LONGEST_ANSWER)
        fail(new TordialError('engine/answer', `the engine ${program} prints more than ${LONGEST_ANSWER} characters`));
    });
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      stderr = (stderr + text).slice(-20_000);
    });
    // a program that dies before it has read its input breaks the pipe; its exit tells the story
    child.stdin.on('error', () => undefined);
    child.stdin.end(input);
    child.on('error', (cause) =>
      fail(
        new TordialError(
          'engine/missing',
          `the engine's program ${program} cannot be started (${cause.message}); install it or correct "command"`,
          {},
          { cause },
        ),
      ),
    );
    child.on('close', (exitCode) => {
      clearTimeout(timer);
      signal?.removeEventListener('abort', abort);
      resolve({ exitCode, stdout, stderr });
    });
  });
}
