import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { request as httpRequest, type IncomingHttpHeaders } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { LoopbackServer } from '../../../app/loopback/server.ts';
import { makeTestBench, type TestBench } from '../make-test-bench.ts';

interface Reply {
  readonly status: number;
  readonly headers: IncomingHttpHeaders;
  readonly text: string;
}

let made: TestBench;
let server: LoopbackServer;
let pageFolder = '';
let host = '';
let address = '';
let cookie = '';

beforeAll(async () => {
  made = await makeTestBench();
  pageFolder = await mkdtemp(join(tmpdir(), 'dwellbook-page-'));
  await writeFile(join(pageFolder, 'index.html'), '<!doctype html><title>page</title>');
  await writeFile(join(pageFolder, '..', `${pageFolder.split('/').at(-1)}.js`), 'outside');
  server = new LoopbackServer({
    bench: made.bench,
    pageFolder,
    testsFolder: join(made.folder, 'tests'),
    onGone: () => undefined,
  });
  address = await server.listen();
  host = new URL(address).host;
});
afterAll(async () => {
  await server.close();
  await made.end();
  await rm(pageFolder, { recursive: true, force: true });
  await rm(`${pageFolder}.js`, { force: true });
});

/** A request as any program could send it: nothing is added. */
function send(
  path: string,
  options: { method?: string; headers?: Record<string, string>; body?: string } = {},
): Promise<Reply> {
  return new Promise((resolve, reject) => {
    const [hostname, port] = host.split(':');
    const request = httpRequest(
      {
        agent: false,
        hostname,
        port,
        path,
        method: options.method ?? 'GET',
        headers: { host, ...options.headers },
      },
      (response) => {
        let text = '';
        response.on('data', (chunk: Buffer) => {
          text += chunk.toString('utf8');
        });
        response.on('end', () =>
          resolve({ status: response.statusCode ?? 0, headers: response.headers, text }),
        );
      },
    );
    request.on('error', reject);
    request.end(options.body);
  });
}

const ours = (): Record<string, string> => ({
  cookie,
  origin: `http://${host}`,
  'content-type': 'application/json',
});
const call = (name: string, input: unknown, headers: Record<string, string> = ours()): Promise<Reply> =>
  send(`/op/${name}`, { method: 'POST', headers, body: JSON.stringify(input) });

describe('the one-time token', () => {
  it('nothing is served without a session', async () => {
    for (const path of ['/', '/index.html', '/events']) expect((await send(path)).status).toBe(401);
    expect(
      (await call('hello', {}, { origin: `http://${host}`, 'content-type': 'application/json' })).status,
    ).toBe(401);
  });
  it('a wrong one gives no session', async () => {
    const reply = await send('/open?token=AAAA');
    expect([reply.status, reply.headers['set-cookie']]).toEqual([403, undefined]);
  });
  it('is exchanged for a cookie that no script and no other site can use', async () => {
    const reply = await send(new URL(address).pathname + new URL(address).search);
    expect([reply.status, reply.headers.location]).toEqual([303, '/']);
    const set = reply.headers['set-cookie']?.[0] ?? '';
    expect(set).toMatch(/; HttpOnly; SameSite=Strict; Path=\/$/);
    cookie = set.split(';')[0] ?? '';
    expect((await send('/', { headers: { cookie } })).text).toContain('<title>page</title>');
  });
  it('works once', async () => {
    const reply = await send(new URL(address).pathname + new URL(address).search);
    expect([reply.status, reply.headers['set-cookie']]).toEqual([403, undefined]);
  });
  it('a guessed cookie is no session', async () => {
    expect((await send('/', { headers: { cookie: `${cookie.slice(0, -1)}_` } })).status).toBe(401);
    expect((await send('/', { headers: { cookie: 'dwellbook_session=' } })).status).toBe(401);
  });
});

describe('who asks', () => {
  it.each([
    ['a name that was made to resolve here (rebinding)', { host: 'evil.example:80' }],
    ['the right port under another name', { host: 'localhost:1' }],
  ])('%s is turned away', async (_, headers) => {
    expect((await send('/', { headers: { cookie, ...headers } })).status).toBe(421);
  });
  it.each([
    ['another site', { origin: 'https://evil.example' }],
    ['another port', { origin: 'http://127.0.0.1:1' }],
    ['a frame without an origin', { origin: 'null' }],
  ])('a call from %s is turned away, and no header lets it read anything', async (_, headers) => {
    const reply = await call('hello', {}, { ...ours(), ...headers });
    expect(reply.status).toBe(403);
    expect(Object.keys(reply.headers).filter((name) => name.startsWith('access-control'))).toEqual([]);
  });
  it('a call without an origin is turned away', async () => {
    expect((await call('hello', {}, { cookie, 'content-type': 'application/json' })).status).toBe(403);
  });
  it('a page of another site that embeds or links is turned away', async () => {
    for (const site of ['cross-site', 'same-site'])
      expect((await send('/', { headers: { cookie, 'sec-fetch-site': site } })).status).toBe(403);
  });
  it('a form cannot call: only JSON is taken', async () => {
    const headers = { ...ours(), 'content-type': 'application/x-www-form-urlencoded' };
    expect((await call('hello', {}, headers)).status).toBe(415);
  });
  it('other methods are not answered, so that no browser is told it may ask', async () => {
    for (const method of ['OPTIONS', 'PUT', 'DELETE', 'HEAD'])
      expect((await send('/', { method, headers: { cookie } })).status).toBe(405);
  });
});

describe('what is served', () => {
  it('the page with its content policy', async () => {
    const { headers } = await send('/', { headers: { cookie } });
    expect(headers['content-security-policy']).toContain("default-src 'none'");
    expect(headers['cache-control']).toBe('no-store');
    expect(headers['x-content-type-options']).toBe('nosniff');
  });
  it.each([
    '/../../etc/passwd',
    '/..%2f..%2fetc%2fpasswd',
    '/%2e%2e/%2e%2e/etc/passwd',
    '/....//etc/passwd',
    '/%00index.html',
    '/%',
    '/..\\..\\x.js',
    '/op/hello',
  ])('%s is not', async (path) => {
    expect((await send(path, { headers: { cookie } })).status).toBe(404);
  });
  it('a file beside the page is not', async () => {
    const name = pageFolder.split('/').at(-1);
    expect((await send(`/..%2f${name}.js`, { headers: { cookie } })).status).toBe(404);
  });
});

describe('calls', () => {
  it('the schema is kept to', async () => {
    for (const [name, input] of [
      ['openTest', {}],
      ['constructor', {}],
      ['edit', { edit: { kind: 'nothing' } }],
    ] as const)
      expect((await call(name, input)).status).toBe(400);
    expect((await send('/op/hello', { method: 'POST', headers: ours(), body: '{' })).status).toBe(400);
  });
  it("the user's fault comes as one sentence", async () => {
    const reply = await call('openTest', { path: '/nowhere/x.dwellbook' });
    expect(reply.status).toBe(422);
    expect(JSON.parse(reply.text)).toMatchObject({
      name: 'InputError',
      message: expect.stringMatching(/cannot be read/),
    });
  });
  it('one that is too large is cut off', async () => {
    const body = JSON.stringify({ path: 'x'.repeat(17 * 1024 * 1024) });
    const outcome = await send('/op/openTest', { method: 'POST', headers: ours(), body }).then(
      (reply) => reply.status,
      () => 'cut off',
    );
    expect([413, 'cut off']).toContain(outcome);
  });
  it('folders outside those that may be looked at stay closed', async () => {
    expect((await call('listFolder', { path: '/etc' })).status).toBe(422);
    expect((await call('listFolder', { path: `${made.folder}/../..` })).status).toBe(422);
    expect((await call('listFolder', { path: made.folder })).status).toBe(200);
  });
});

describe('uploads', () => {
  const upload = (query: string, body: string): Promise<Reply> =>
    send(`/upload?${query}`, { method: 'POST', headers: { cookie, origin: `http://${host}` }, body });

  it('a clip is written whole beside the tests, once for the same content, numbered for another', async () => {
    const folder = join(made.folder, 'tests', 'rig', 'clips');
    for (const body of ['one', 'one', 'two'])
      expect((await upload('name=1Hz.mp4&folder=rig', body)).status).toBe(200);
    expect((await readdir(folder)).sort()).toEqual(['1Hz 2.mp4', '1Hz.mp4']);
    expect(await readFile(join(folder, '1Hz 2.mp4'), 'utf8')).toBe('two');
  });
  it('a name cannot lead out of the folder', async () => {
    const reply = await upload('name=..%2F..%2Fx.mp4&folder=..%2F..%2Fetc', 'x');
    expect(JSON.parse(reply.text)).toEqual({ path: join(made.folder, 'tests', 'etc', 'clips', 'x.mp4') });
  });
  it('what is no clip is refused', async () => {
    for (const name of ['run.sh', '.mp4', 'x.mp4%2F..%2Frun.sh', ''])
      expect((await upload(`name=${name}`, 'x').catch(() => ({ status: 422 }))).status).toBe(422);
  });
});

it('only 127.0.0.1 is listened on', () => {
  expect(host.startsWith('127.0.0.1:')).toBe(true);
});
