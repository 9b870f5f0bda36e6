export interface Page<T> {
  items: T[]
  total: number
}

/** Reads a paged list to its end. Stops on an empty page too, should rows vanish between two reads. */
export async function everyPage<T>(read: (page: number) => Promise<Page<T>>): Promise<T[]> {
  const all: T[] = []
  for (let page = 1; ; page += 1) {
    const { items, total } = await read(page)
    all.push(...items)
    if (items.length === 0 || all.length >= total) return all
  }
}
