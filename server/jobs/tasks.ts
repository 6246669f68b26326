/** What worker threads can do, by name. Every engine door that takes longer than a moment is here. */
import type { Control } from '../engine/control.ts';

type Task = (input: never, control: Control) => Promise<unknown>;

const all = {
  bcryptHash: async (input: { digest: string; cost: number }) => (await import('bcryptjs')).hashSync(input.digest, input.cost),
  bcryptCompare: async (input: { digest: string; hash: string }) => (await import('bcryptjs')).compareSync(input.digest, input.hash),
  pictureViews: async (input: { file: Uint8Array }) => (await import('../features/stamp-sets/picture-views.ts')).pictureViews(input),
} satisfies Record<string, Task>;

export const tasks: Record<string, ((input: unknown, control: Control) => Promise<unknown>) | undefined> = all as never;
