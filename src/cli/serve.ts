import { CaseError } from '../case/errors.ts';
import { startServer } from '../service/server.ts';
import { status } from './status.ts';

/** `tarry serve`: service and page on loopback until Ctrl-C; returns the exit status. */
export async function serve(options: { readonly port: string }): Promise<number> {
  const port = Number(options.port);
  if (!Number.isInteger(port) || port < 0 || port > 65_535) {
    throw new CaseError(
      'NO_SUCH_PORT',
      `"${options.port}" is no port`,
      {},
      'Give a whole number from 0 to 65535',
    );
  }
  const server = await startServer({ port });
  console.log(`Tarry serves on ${server.address} (this machine only). Ctrl-C ends it.`);
  await new Promise<void>((resolve) => {
    process.once('SIGINT', resolve);
    process.once('SIGTERM', resolve);
  });
  await server.close();
  return status.answered;
}
