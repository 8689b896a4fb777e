import { createRouter, createWebHistory } from "vue-router";
import { useSessionStore } from "../stores/session.ts";
import { routes } from "./routes.ts";

export const router = createRouter({
  history: createWebHistory(),
  routes,
  scrollBehavior(to, from, saved) {
    if (saved) return saved;
    return to.path === from.path ? false : { top: 0 };
  },
});

router.beforeEach(async (to) => {
  const session = useSessionStore();
  if (!session.known) {
    try {
      await session.load();
    } catch {
      // The page itself will say what is wrong, with a way to try again.
      return true;
    }
  }
  if (to.meta.open === true || session.signedIn) return true;
  return { name: "sign-in", query: to.fullPath === "/" ? {} : { next: to.fullPath } };
});

/** A new page begins at its headline, also for those who listen to it. */
router.afterEach((to, from) => {
  if (from.matched.length === 0 || to.path === from.path) return;
  setTimeout(() => document.querySelector<HTMLElement>("h1")?.focus({ preventScroll: true }), 0);
});
