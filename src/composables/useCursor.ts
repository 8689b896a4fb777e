import { computed } from "vue";
import { useRoute, useRouter } from "vue-router";

/** Project, lane and commit under the cursor: they live in the address, so that back undoes and a link says it all. */
export function useCursor() {
  const route = useRoute();
  const router = useRouter();
  const text = (value: unknown) => (typeof value === "string" && value !== "" ? value : null);

  const project = computed(() => String(route.params.project ?? ""));
  const lane = computed(() => text(route.query.lane));
  const at = computed(() => text(route.query.at));

  /** Changes parts of the query; null takes a part away. */
  function put(parts: Readonly<Record<string, string | null>>, replace = false) {
    const query = { ...route.query };
    for (const [name, value] of Object.entries(parts)) {
      if (value === null) delete query[name];
      else query[name] = value;
    }
    return router[replace ? "replace" : "push"]({ query });
  }
  /** The query that a link to another page of the project carries along. */
  const carried = computed(() => ({
    ...(lane.value === null ? {} : { lane: lane.value }),
    ...(at.value === null ? {} : { at: at.value }),
  }));
  return { project, lane, at, put, carried };
}
