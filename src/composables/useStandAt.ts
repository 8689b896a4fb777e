import { watch } from "vue";
import { useRoute } from "vue-router";
import { useCursor } from "./useCursor.ts";

/** A page about one build puts the strip into that build's lane and on its commit, however it was reached. */
export function useStandAt(place: () => { lane: string; commit: string } | undefined) {
  const { put } = useCursor();
  const route = useRoute();
  watch(
    place,
    (stand) => {
      if (!stand || (route.query.lane === stand.lane && route.query.at === stand.commit)) return;
      void put({ lane: stand.lane, at: stand.commit }, true);
    },
    { immediate: true },
  );
}
