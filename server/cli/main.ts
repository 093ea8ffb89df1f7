import { Command, Option } from 'commander';
import { bannerText } from '../clinical-banner.js';
import { processEnvironment, settings } from '../config.js';
import { serviceVersion } from '../version.js';
import { migrateCommand } from './migrate.js';
import { start } from './start.js';

// Flags stand over the environment: each is written as the variable it sets.
function environmentWith(flags: Readonly<Record<string, unknown>>): Record<string, string | undefined> {
  const environment: Record<string, string | undefined> = { ...processEnvironment() };
  for (const [name, { flag }] of Object.entries(settings)) {
    if (flag === null) continue;
    const value = flags[flag.slice(2).replace(/-(\w)/g, (_, letter: string) => letter.toUpperCase())];
    if (typeof value === 'string') environment[name] = value;
  }
  return environment;
}

const program = new Command('fluence-ledger').version(serviceVersion).addHelpText('after', `\n${bannerText}`);

function withSettings(command: Command): Command {
  for (const [name, { flag, help, fallback }] of Object.entries(settings)) {
    if (flag !== null) command.addOption(new Option(`${flag} <value>`, `${help} (${name}, default ${fallback})`));
  }
  const variables = Object.entries(settings).filter(([, { flag }]) => flag === null);
  const lines = variables.map(
    ([name, { help, fallback }]) => `  ${name}  ${help}${fallback === '' ? '' : ` (default ${fallback})`}`,
  );
  return command.addHelpText('after', `\nEnvironment only:\n${lines.join('\n')}`);
}

withSettings(program.command('start', { isDefault: true }).description('serve'))
  .option('--demo', 'use the demo practice, in a database of its own unless DATABASE_URL is set')
  .action(async (flags: Record<string, unknown>) => {
    process.exitCode = await start(environmentWith(flags), flags.demo === true);
  });
withSettings(program.command('migrate').description('bring the database up to date and exit')).action(
  (flags: Record<string, unknown>) => {
    process.exitCode = migrateCommand(environmentWith(flags));
  },
);

await program.parseAsync();
