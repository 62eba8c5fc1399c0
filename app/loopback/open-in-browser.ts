import { spawn } from 'node:child_process';

/** The command that opens an address in the browser; null where there is no display to open it on. */
export function browserCommand(
  address: string,
  env: Readonly<Record<string, string | undefined>>,
  platform: NodeJS.Platform,
): { command: string; args: string[] } | null {
  if (platform === 'darwin') return { command: 'open', args: [address] };
  if (platform === 'win32') return { command: 'rundll32', args: ['url.dll,FileProtocolHandler', address] };
  const display = env['DISPLAY'] || env['WAYLAND_DISPLAY'];
  return display ? { command: 'xdg-open', args: [address] } : null;
}

/** Opens an address in the browser where there is a display; a browser that does not start is no fault. */
export function openInBrowser(
  address: string,
  env: Readonly<Record<string, string | undefined>>,
  platform: NodeJS.Platform,
): void {
  const found = browserCommand(address, env, platform);
  if (!found) return;
  const child = spawn(found.command, found.args, { stdio: 'ignore', detached: true });
  child.on('error', () => undefined);
  child.unref();
}
