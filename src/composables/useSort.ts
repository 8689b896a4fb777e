import { computed } from "vue";
import { useRoute, useRouter } from "vue-router";

export interface SortOrder {
  readonly name: string;
  readonly direction: "ascending" | "descending";
}

/**
 * Sorts a table by one of its columns; the order lives in the address (`?sort=-error`), so that it survives a reload
 * and travels with a link. Without one the rows stay as they came. Ties keep their order.
 */
export function useSort<T>(rows: () => readonly T[], columns: Readonly<Record<string, (row: T) => number | string>>) {
  const route = useRoute();
  const router = useRouter();
  const order = computed<SortOrder | null>(() => {
    const text = typeof route.query.sort === "string" ? route.query.sort : "";
    const name = text.replace(/^-/, "");
    if (!(name in columns)) return null;
    return { name, direction: text.startsWith("-") ? "descending" : "ascending" };
  });
  const sorted = computed<readonly T[]>(() => {
    const { name, direction } = order.value ?? {};
    const value = name === undefined ? undefined : columns[name];
    if (!value) return rows();
    const sign = direction === "descending" ? -1 : 1;
    return [...rows()].sort((a, b) => {
      const [x, y] = [value(a), value(b)];
      return sign * (typeof x === "number" && typeof y === "number" ? x - y : String(x).localeCompare(String(y)));
    });
  });
  /** Numbers are first sorted largest first, words from A; the third press takes the order away. */
  function sortBy(name: string): void {
    const first = rows()[0];
    const numeric = first !== undefined && typeof columns[name]?.(first) === "number";
    const [one, two] = numeric ? [`-${name}`, name] : [name, `-${name}`];
    const now = route.query.sort;
    const sort = now === one ? two : now === two ? undefined : one;
    void router.replace({ query: { ...route.query, sort } });
  }
  return { sorted, order, sortBy };
}
