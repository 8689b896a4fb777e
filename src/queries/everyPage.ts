import { client } from "../api/client.ts";
import type { RequestOptions } from "../api/client.ts";

export interface Page<T> {
  readonly items: T[];
  readonly next: string | null;
}

/** All items of a list, page after page, at most `most` of them. */
export async function everyPage<T>(path: string, options: RequestOptions = {}, most = 20_000): Promise<T[]> {
  const items: T[] = [];
  let cursor: string | null = null;
  do {
    const page: Page<T> = await client.get<Page<T>>(path, {
      ...options,
      query: { ...options.query, limit: 500, cursor },
    });
    items.push(...page.items);
    cursor = page.next;
  } while (cursor !== null && items.length < most);
  return items;
}
