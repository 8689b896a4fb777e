import type { RouteRecordRaw } from "vue-router";

declare module "vue-router" {
  interface RouteMeta {
    /** Pages that need no session. */
    readonly open?: boolean;
    /** Entry of the project's navigation that is lit. */
    readonly section?: "overview" | "breaks" | "builds" | "members" | "tokens";
  }
}

const project: RouteRecordRaw = {
  path: "/projects/:project",
  component: () => import("../views/ProjectFrameView.vue"),
  children: [
    {
      path: "",
      name: "overview",
      component: () => import("../views/OverviewDetailView.vue"),
      meta: { section: "overview" },
    },
    {
      path: "breaks",
      name: "breaks",
      component: () => import("../views/BreakListView.vue"),
      meta: { section: "breaks" },
    },
    {
      path: "breaks/:id",
      name: "break",
      component: () => import("../views/BreakDetailView.vue"),
      meta: { section: "breaks" },
    },
    {
      path: "builds",
      name: "builds",
      component: () => import("../views/BuildListView.vue"),
      meta: { section: "builds" },
    },
    {
      path: "builds/:id",
      name: "build",
      component: () => import("../views/BuildDetailView.vue"),
      meta: { section: "builds" },
    },
    {
      path: "builds/:id/blocks/:blockId",
      name: "block",
      component: () => import("../views/BlockDetailView.vue"),
      meta: { section: "builds" },
    },
    {
      path: "members",
      name: "members",
      component: () => import("../views/MemberListView.vue"),
      meta: { section: "members" },
    },
    {
      path: "tokens",
      name: "tokens",
      component: () => import("../views/TokenListView.vue"),
      meta: { section: "tokens" },
    },
  ],
};

export const routes: RouteRecordRaw[] = [
  { path: "/", name: "projects", component: () => import("../views/ProjectListView.vue") },
  { path: "/sign-in", name: "sign-in", component: () => import("../views/SignInFormView.vue"), meta: { open: true } },
  { path: "/set-up", name: "set-up", component: () => import("../views/SetUpFormView.vue"), meta: { open: true } },
  {
    path: "/invitation",
    name: "invitation",
    component: () => import("../views/InvitationFormView.vue"),
    meta: { open: true },
  },
  project,
  { path: "/:rest(.*)*", name: "nothing", component: () => import("../views/NothingDetailView.vue") },
];
