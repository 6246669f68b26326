// @vitest-environment node
/**
 * How much JavaScript a page brings, gzip, counted in a real production build: what a browser fetches before it can show the page.
 * The bounds are the project's own; the public "good" limits of page speed leave room for twice as much.
 */
import { gzipSync } from 'node:zlib';
import { build } from 'vite';
import type { Rolldown } from 'vite';
import { beforeAll, describe, expect, it } from 'vitest';

const KIB = 1024;
const SIGN_IN_KIB = 110, FIRST_PAGE_KIB = 220, ROUTE_KIB = 80;
/** A bound is passed only by more than this share, so that a patch release of a package does not stop the work. */
const TOLERANCE = 1.05;

type Chunk = Rolldown.OutputChunk;
let chunks: Map<string, Chunk>;

beforeAll(async () => {
  // The packages' development halves would be counted otherwise.
  const before = process.env.NODE_ENV;
  process.env.NODE_ENV = 'production';
  try {
    const built = (await build({ mode: 'production', logLevel: 'error', build: { write: false } })) as Rolldown.RolldownOutput | Rolldown.RolldownOutput[];
    chunks = new Map([built].flat().flatMap(({ output }) => output).filter((part): part is Chunk => part.type === 'chunk').map((chunk) => [chunk.fileName, chunk]));
  } finally {
    process.env.NODE_ENV = before;
  }
}, 120_000);

/** A chunk with everything that it imports before it runs. */
function closure(fileName: string, into = new Set<string>()): Set<string> {
  if (into.has(fileName) || !chunks.has(fileName)) return into;
  into.add(fileName);
  chunks.get(fileName)!.imports.forEach((next) => closure(next, into));
  return into;
}
const kib = (fileNames: Iterable<string>) => [...fileNames].reduce((sum, name) => sum + gzipSync(chunks.get(name)!.code).length, 0) / KIB;
const of = (source: string) => {
  const chunk = [...chunks.values()].find((c) => c.facadeModuleId?.endsWith(source));
  if (!chunk) throw new Error(`The build has no chunk for ${source}.`);
  return chunk.fileName;
};
const page = (...sources: string[]) => {
  const needed = new Set<string>(closure([...chunks.values()].find((c) => c.isEntry)!.fileName));
  sources.forEach((source) => closure(of(source), needed));
  return needed;
};
const views = () => [...chunks.values()].flatMap((c) => /\/src(\/views\/\w+View\.vue)$/.exec(c.facadeModuleId ?? '')?.[1] ?? []);
const PLAIN = ['/views/SignInView.vue', '/views/RegisterView.vue', '/views/InvitationView.vue'];

describe('JavaScript of a page', () => {
  it.each(PLAIN)(`%s comes with at most ${SIGN_IN_KIB} KiB`, (view) => {
    expect(kib(page(view))).toBeLessThan(SIGN_IN_KIB * TOLERANCE);
  });

  it(`of the application comes with at most ${FIRST_PAGE_KIB} KiB, whichever page is opened first`, () => {
    const heavy = views().map((view) => [view, Math.round(kib(page('/frame/AppShell.vue', view)))] as const).filter(([, size]) => size > FIRST_PAGE_KIB * TOLERANCE);
    expect(heavy).toEqual([]);
  });

  it(`adds at most ${ROUTE_KIB} KiB to what frame and fields have brought for every page`, () => {
    const frame = page('/frame/AppShell.vue', '/views/SignInView.vue');
    const heavy = views().map((view) => [view, Math.round(kib([...page('/frame/AppShell.vue', view)].filter((name) => !frame.has(name))))] as const).filter(([, size]) => size > ROUTE_KIB * TOLERANCE);
    expect(views().length).toBeGreaterThan(5);
    expect(heavy).toEqual([]);
  });

  it('holds no schema of the contract: only its types reach the browser', () => {
    const modules = [...chunks.values()].flatMap((chunk) => Object.keys(chunk.modules));
    expect(modules.filter((id) => /\/server\/contract\/|\/node_modules\/zod\//.test(id))).toEqual([]);
  });
});
