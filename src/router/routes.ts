import type { RouteRecordRaw } from 'vue-router'

declare module 'vue-router' {
  interface RouteMeta {
    /** Opens without sign-in. */
    isPublic?: boolean
    /** Which entry of the navigation it belongs to. */
    section?: 'Shelf' | 'Sizings' | 'Help'
  }
}

/** Every address of the product; each page is loaded when it is first opened. */
export const routes: RouteRecordRaw[] = [
  {
    path: '/sign-in',
    component: () => import('../pages/sign-in/SignInPage.vue'),
    meta: { isPublic: true },
  },
  {
    path: '/sizings/:number/print',
    component: () => import('../pages/sizings/SizingPage.vue'),
    props: ({ params }) => ({ number: String(params.number), isSheet: true }),
    meta: { section: 'Sizings' },
  },
  { path: '/s/:number', redirect: ({ params }) => `/sizings/${sizingNumber(String(params.number))}` },
  {
    path: '/',
    component: () => import('../layouts/MainLayout.vue'),
    children: [
      { path: '', component: () => import('../pages/shelf/ShelfPage.vue'), meta: { section: 'Shelf' } },
      {
        path: 'blocks/:code',
        component: () => import('../pages/block/BlockPage.vue'),
        props: ({ params }) => ({ code: String(params.code) }),
        meta: { section: 'Shelf' },
      },
      {
        path: 'blocks/:code/revisions/:number(\\d{1,7})',
        component: () => import('../pages/block/BlockPage.vue'),
        props: ({ params }) => ({ code: String(params.code), revision: Number(params.number) }),
        meta: { section: 'Shelf' },
      },
      {
        path: 'sizings',
        component: () => import('../pages/sizings/SizingListPage.vue'),
        meta: { section: 'Sizings' },
      },
      {
        path: 'sizings/:number',
        component: () => import('../pages/sizings/SizingPage.vue'),
        props: ({ params }) => ({ number: String(params.number), isSheet: false }),
        meta: { section: 'Sizings' },
      },
      { path: 'help', redirect: '/help/block-format' },
      { path: 'help/keys', component: () => import('../pages/help/KeysPage.vue'), meta: { section: 'Help' } },
      {
        path: 'help/:document',
        component: () => import('../pages/help/DocumentPage.vue'),
        props: ({ params }) => ({ name: String(params.document) }),
        meta: { section: 'Help' },
      },
      { path: 'settings', component: () => import('../pages/settings/SettingsPage.vue') },
      {
        path: 'problems/:code',
        component: () => import('../pages/problem/ProblemPage.vue'),
        props: ({ params }) => ({ code: String(params.code) }),
        meta: { isPublic: true },
      },
      {
        path: ':rest(.*)*',
        component: () => import('../pages/not-found/NotFoundPage.vue'),
        meta: { isPublic: true },
      },
    ],
  },
]

const sizingNumber = (typed: string): string => (/^\d+$/.test(typed) ? `S-${typed}` : typed.toUpperCase())
