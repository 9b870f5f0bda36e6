import type { RouteRecordRaw } from 'vue-router'
import MainLayout from '#src/layouts/MainLayout.vue'
import { countRoutes } from './count-routes.ts'

export const routes: RouteRecordRaw[] = [
  {
    path: '/sign-in',
    name: 'sign-in',
    component: () => import('#src/pages/people/SignInPage.vue'),
    meta: { open: true },
  },
  {
    path: '/password-reset/:token?',
    name: 'password-reset',
    component: () => import('#src/pages/people/PasswordResetPage.vue'),
    props: true,
    meta: { open: true },
  },
  {
    path: '/',
    component: MainLayout,
    children: [
      {
        path: '',
        name: 'today',
        component: () => import('#src/pages/today/TodayPage.vue'),
        meta: { place: 'today', offline: true },
      },
      ...countRoutes,
      {
        path: 'rooms',
        name: 'rooms',
        component: () => import('#src/pages/catalogue/RoomListPage.vue'),
        meta: { place: 'rooms', offline: true },
      },
      {
        path: '',
        component: () => import('#src/pages/catalogue/RoomFrame.vue'),
        meta: { place: 'rooms', offline: true },
        children: [
          {
            path: 'rooms/:roomId',
            name: 'room',
            component: () => import('#src/pages/catalogue/RoomPage.vue'),
            props: true,
          },
          {
            path: 'bins/:binId',
            name: 'bin',
            component: () => import('#src/pages/catalogue/BinPage.vue'),
            props: true,
          },
        ],
      },
      {
        path: 'restock',
        meta: { place: 'restock', roles: ['coordinator'] },
        children: [
          { path: '', name: 'restock', component: () => import('#src/pages/replenishment/RestockPage.vue') },
          {
            path: 'holiday',
            name: 'holiday',
            component: () => import('#src/pages/replenishment/HolidayPage.vue'),
          },
          { path: 'orders', name: 'orders', component: () => import('#src/pages/replenishment/OrdersPage.vue') },
          {
            path: 'orders/:orderId',
            name: 'order',
            component: () => import('#src/pages/replenishment/OrderPage.vue'),
            props: true,
          },
        ],
      },
      {
        path: 'review',
        meta: { place: 'review', roles: ['reviewer', 'coordinator', 'administrator'] },
        children: [
          { path: '', name: 'review', component: () => import('#src/pages/review/ReviewPage.vue') },
          {
            path: ':binId',
            name: 'aim',
            component: () => import('#src/pages/review/AimPage.vue'),
            props: true,
            meta: { roles: ['reviewer', 'coordinator'] },
          },
        ],
      },
      {
        path: 'planned-changes',
        meta: {
          place: 'hospital',
          placeOf: { reviewer: 'review' },
          roles: ['coordinator', 'reviewer', 'administrator'],
        },
        children: [
          { path: '', name: 'planned-changes', component: () => import('#src/pages/planned/PlannedListPage.vue') },
          {
            path: ':id',
            name: 'planned-change',
            component: () => import('#src/pages/planned/PlannedPage.vue'),
            props: true,
          },
        ],
      },
      {
        path: 'hospital',
        component: () => import('#src/pages/catalogue/HospitalFrame.vue'),
        meta: { place: 'hospital', roles: ['coordinator', 'administrator'] },
        children: [
          { path: '', name: 'hospital', component: { render: () => null } },
          {
            path: 'settings',
            name: 'hospital-settings',
            component: () => import('#src/pages/catalogue/SettingsPage.vue'),
            meta: { roles: ['administrator'] },
          },
          {
            path: 'calendars',
            name: 'calendars',
            component: () => import('#src/pages/catalogue/CalendarListPage.vue'),
          },
          {
            path: 'calendars/:id',
            name: 'calendar',
            component: () => import('#src/pages/catalogue/CalendarPage.vue'),
            props: true,
          },
          {
            path: ':kind(wards|rooms|items|suppliers|bins|people)',
            name: 'hospital-list',
            component: () => import('#src/pages/catalogue/RecordListPage.vue'),
            props: true,
          },
          {
            path: ':kind(wards|rooms|items|suppliers|bins|people)/:id',
            name: 'hospital-record',
            component: () => import('#src/pages/catalogue/RecordPage.vue'),
            props: true,
          },
        ],
      },
      {
        path: 'me',
        name: 'me',
        component: () => import('#src/pages/people/MePage.vue'),
        meta: { place: 'me', offline: true },
      },
      {
        path: 'not-yours',
        name: 'not-yours',
        component: () => import('#src/pages/people/NotYoursPage.vue'),
        meta: { offline: true },
      },
      { path: ':rest(.*)*', name: 'not-found', component: () => import('#src/pages/people/NotFoundPage.vue') },
    ],
  },
]
