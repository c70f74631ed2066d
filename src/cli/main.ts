#!/usr/bin/env node
import { realpathSync } from 'node:fs';
import process from 'node:process';
import { fileURLToPath } from 'node:url';
import { Command, CommanderError, Option } from 'commander';
import { version } from '../run/version.ts';
import { check } from './check.ts';
import { mesh } from './mesh.ts';
import { report } from './report-failure.ts';
import { serve } from './serve.ts';
import { solve } from './solve.ts';
import { status } from './status.ts';

/**
 * Runs one command line.
 *
 * @param words without the program's own name
 * @returns the exit status (CASE.md, commands)
 */
export async function main(words: readonly string[]): Promise<number> {
  let result: number = status.answered;
  const command = `tarry ${words.join(' ')}`;
  const program = new Command('tarry')
    .description('Mean exit times, shares and layouts for particles that diffuse in a flat compartment.')
    .version(version)
    .exitOverride()
    .showHelpAfterError('Try: tarry --help');
  const json = () => new Option('--json', 'print JSON instead of tables');
  const does =
    <A extends unknown[]>(work: (...given: A) => Promise<number>) =>
    async (...given: A): Promise<void> => {
      result = await work(...given);
    };
  program
    .command('check')
    .description('geometry and physics checks; nothing is solved')
    .argument('<case>', 'case file, or - for standard input')
    .addOption(json())
    .action(does((path: string, options: { json?: true }) => check(path, options)));
  program
    .command('mesh')
    .description('triangulation and its quality figures')
    .argument('<case>', 'case file, or - for standard input')
    .option('--layout <name>', 'only this layout; the first without it')
    .option('--out <file>', 'write the triangulation as VTK XML (.vtu)')
    .addOption(json())
    .action(
      does((path: string, options: { layout?: string; out?: string; json?: true }) => mesh(path, options)),
    );
  program
    .command('solve')
    .description('answers for one layout or each')
    .argument('<case>', 'case file, or - for standard input')
    .option('--layout <name>', 'only this layout')
    .option('--start <name>', 'only this start')
    .addOption(json())
    .action(
      does((path: string, options: { layout?: string; start?: string; json?: true }) =>
        solve(path, { ...options, command }),
      ),
    );
  program
    .command('serve')
    .description('service and page on this machine')
    .option('--port <number>', 'first port to try', '8717')
    .action(does((options: { port: string }) => serve(options)));
  try {
    await program.parseAsync([...words], { from: 'user' });
  } catch (error) {
    if (error instanceof CommanderError) return error.exitCode === 0 ? status.answered : status.caseAtFault;
    return report(error, words.includes('--json'));
  }
  return result;
}

/** True when this file was started as a program, by a link to it too. */
function startedDirectly(): boolean {
  const started = process.argv[1];
  return started !== undefined && realpathSync(started) === fileURLToPath(import.meta.url);
}

if (startedDirectly()) process.exitCode = await main(process.argv.slice(2));
