import type { RouteRecordRaw } from 'vue-router'

/** The pages of a counting round. Names: `count`, with an optional room. */
export const countRoutes: RouteRecordRaw[] = []
