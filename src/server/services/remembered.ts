/** Results by key, newest last. */
export type Memory<Result> = Map<string, Promise<Result>>;

/**
 * Results of many things of which some are known: what is not is worked out in one go, each once as long as it is remembered. One that
 * fails is forgotten, so that the next look tries again.
 *
 * @param memory  Where results are kept, `size` of them.
 * @param keyOf  Two things of one key have one result.
 * @param workOut  Results in the order asked.
 */
export async function remembered<Item, Result>(
  { memory, size }: { memory: Memory<Result>; size: number },
  items: readonly Item[],
  keyOf: (item: Item) => string,
  workOut: (fresh: Item[]) => Promise<Result[]>,
): Promise<Result[]> {
  const fresh = new Map(items.map((item) => [keyOf(item), item] as const).filter(([key]) => !memory.has(key)));
  const keys = [...fresh.keys()];
  const work = keys.length > 0 ? workOut([...fresh.values()]) : null;
  const results = items.map((item) => {
    const key = keyOf(item);
    return work && fresh.has(key) ? work.then((done) => done[keys.indexOf(key)]!) : memory.get(key)!;
  });
  items.forEach((item, index) => keep(memory, size, keyOf(item), results[index]!));
  return Promise.all(results);
}

function keep<Result>(memory: Memory<Result>, size: number, key: string, result: Promise<Result>): void {
  memory.delete(key);
  memory.set(key, result);
  result.catch(() => memory.delete(key));
  const [oldest] = memory.keys();
  if (memory.size > size && oldest !== undefined) memory.delete(oldest);
}
