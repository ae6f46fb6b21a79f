import { demoSignIns } from './demo';
import { startServer } from './server';
import { readSettings } from './settings';

/** Starts Elbowroom and prints where it is. */
async function main(): Promise<void> {
  const settings = readSettings(process.env, process.argv.slice(2));
  const server = await startServer(settings);
  const lines = [`Elbowroom is at ${server.url}`];
  if (settings.plainOnNetwork)
    lines.push(
      'WARNING: plain HTTP on a network. Passwords and motion orders can be read and changed on the way.',
    );
  const { context } = server;
  if (!context.people.any())
    lines.push(
      '',
      'This workshop has no owner yet. Open the page and type this one-time code:',
      `  ${context.setupCode.shown}`,
    );
  const demo = demoSignIns(settings.dataFolder);
  if (demo.length > 0) {
    lines.push('', `${context.workshop.get().name}, demo sign-ins:`);
    for (const { email, password, role } of demo) lines.push(`  ${email.padEnd(24)} ${password}   ${role}`);
  }
  lines.push('', 'Software only, not a safety device: keep a hand on the switch in the motor supply.');
  process.stdout.write(`${lines.join('\n')}\n`);

  let closing = false;
  const close = (code: number) => {
    if (closing) return;
    closing = true;
    void server.close().then(() => process.exit(code));
  };
  process.on('SIGTERM', () => close(0));
  process.on('SIGINT', () => close(0));
  // A mistake of ours must not leave an arm moving: stop first, then end.
  process.on('uncaughtException', (error) => {
    context.log.error({ err: error }, 'uncaught');
    close(1);
  });
  process.on('unhandledRejection', (error) => {
    context.log.error({ err: error }, 'unhandled');
    close(1);
  });
}

main().catch((error: unknown) => {
  process.stderr.write(
    `Elbowroom could not start: ${error instanceof Error ? error.message : String(error)}\n`,
  );
  process.exit(1);
});
