import { protocol } from 'electron';
import { PAGE_HEADERS } from '../shared/content-policy.ts';
import { pageFile } from '../shared/page-files.ts';

/** The page's own scheme and host: nothing else is ever loaded into the window. */
export const PAGE_SCHEME = 'dwellbook';
const PAGE_HOST = 'bench';
export const PAGE_ADDRESS = `${PAGE_SCHEME}://${PAGE_HOST}/index.html`;

/** Whether an address is one of the page's own. */
export function isPageAddress(address: string): boolean {
  if (!URL.canParse(address)) return false;
  const url = new URL(address);
  return url.protocol === `${PAGE_SCHEME}:` && url.host === PAGE_HOST;
}

/** Declares the scheme; must run before the program is ready. */
export function declarePageScheme(): void {
  protocol.registerSchemesAsPrivileged([
    { scheme: PAGE_SCHEME, privileges: { standard: true, secure: true, supportFetchAPI: true } },
  ]);
}

/** Serves the built page under its scheme, with its content policy, and nothing outside its folder. */
export function setupPageScheme(pageFolder: string): void {
  protocol.handle(PAGE_SCHEME, async (request) => {
    const file =
      request.method === 'GET' && isPageAddress(request.url)
        ? await pageFile(pageFolder, new URL(request.url).pathname)
        : null;
    if (!file) return new Response('There is no such page.', { status: 404, headers: PAGE_HEADERS });
    const headers = { ...PAGE_HEADERS, 'Content-Type': file.type };
    return new Response(new Uint8Array(file.body), { headers });
  });
}
