import { defineAsyncComponent, type Component } from 'vue'

/** Parts that a page shows only once they are opened. They are as large as many a page, so they are fetched apart from it. */
export const apart = <Part extends Component>(fetch: () => Promise<{ default: Part }>) => ({
  fetch,
  Sheet: defineAsyncComponent({ loader: fetch, suspensible: false }),
})

export const workingSheet = apart(() => import('~/components/base/BaseWorkingSheet.vue'))
export const dialogSheet = apart(() => import('~/components/base/BaseDialogSheet.vue'))
export const drawerSheet = apart(() => import('~/components/base/BaseDrawerSheet.vue'))
