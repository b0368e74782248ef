type Memories = Map<string, WeakMap<object, unknown>>;

const shared = globalThis as typeof globalThis & { tailmarkMemories?: Memories };

/**
 * What a process remembers by object, under a name of its own. On the global object, since pages and routes are bundled
 * apart: memory of a module would be filled once by each of them.
 */
export function processMemory<K extends object, V>(name: string): WeakMap<K, V> {
  shared.tailmarkMemories ??= new Map();
  const known = shared.tailmarkMemories.get(name) ?? new WeakMap<object, unknown>();
  shared.tailmarkMemories.set(name, known);
  return known as WeakMap<K, V>;
}
