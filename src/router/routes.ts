import type { RouteRecordRaw } from 'vue-router';
import type { Area } from '@/router/areas.ts';

declare module 'vue-router' {
  interface RouteMeta {
    /** Without it, a page needs somebody who is signed in. */
    access?: 'anyone' | 'nobody' | Area;
    /** The page draws to the edges and keeps its own measure. */
    isWide?: boolean;
  }
}

/** `access: 'nobody'` is for pages that make sense only before signing in. */
export const routes: RouteRecordRaw[] = [
  { path: '/', name: 'home', component: () => import('@/views/HomeView.vue') },
  {
    path: '/sign-in',
    name: 'sign-in',
    meta: { access: 'nobody' },
    component: () => import('@/views/SignInView.vue'),
  },
  {
    path: '/setup',
    name: 'setup',
    meta: { access: 'nobody' },
    component: () => import('@/views/SetupView.vue'),
  },
  {
    path: '/invitations/:token',
    name: 'invitation',
    meta: { access: 'anyone' },
    component: () => import('@/views/InvitationView.vue'),
  },
  {
    // The form in which the link is sent.
    path: '/invitation',
    redirect: (to) => ({ name: 'invitation', params: { token: String(to.query.token) }, query: {} }),
  },
  { path: '/runs', name: 'runs', meta: { access: 'runs' }, component: () => import('@/views/RunsView.vue') },
  {
    path: '/runs/new',
    name: 'run-new',
    meta: { access: 'bring-in' },
    component: () => import('@/views/RunEditView.vue'),
  },
  {
    path: '/runs/:id',
    name: 'run',
    meta: { access: 'runs' },
    component: () => import('@/views/RunView.vue'),
  },
  {
    path: '/runs/:id/edit',
    name: 'run-edit',
    meta: { access: 'bring-in' },
    component: () => import('@/views/RunEditView.vue'),
  },
  {
    path: '/bring-in',
    name: 'bring-in',
    meta: { access: 'bring-in' },
    component: () => import('@/views/BringInView.vue'),
  },
  {
    path: '/sensors',
    name: 'sensors',
    meta: { access: 'sensors' },
    component: () => import('@/views/SensorsView.vue'),
  },
  {
    path: '/recordings/:id',
    name: 'recording',
    meta: { access: 'recordings' },
    component: () => import('@/views/RecordingView.vue'),
  },
  {
    path: '/bench/:recordingId',
    name: 'bench',
    meta: { access: 'bench', isWide: true },
    component: () => import('@/views/BenchView.vue'),
  },
  {
    path: '/reviews',
    name: 'reviews',
    meta: { access: 'reviews' },
    component: () => import('@/views/ReviewsView.vue'),
  },
  {
    path: '/reviews/:recordingId',
    name: 'review',
    meta: { access: 'reviews' },
    component: () => import('@/views/ReviewView.vue'),
  },
  {
    path: '/passes',
    name: 'passes',
    meta: { access: 'passes' },
    component: () => import('@/views/PassesView.vue'),
  },
  {
    path: '/collections',
    name: 'collections',
    meta: { access: 'collections' },
    component: () => import('@/views/CollectionsView.vue'),
  },
  {
    path: '/collections/new',
    name: 'collection-new',
    meta: { access: 'collections' },
    component: () => import('@/views/CollectionEditView.vue'),
  },
  {
    path: '/collections/:id',
    name: 'collection',
    meta: { access: 'collections' },
    component: () => import('@/views/CollectionView.vue'),
  },
  {
    path: '/collections/:id/edit',
    name: 'collection-edit',
    meta: { access: 'collections' },
    component: () => import('@/views/CollectionEditView.vue'),
  },
  {
    path: '/releases',
    name: 'releases',
    meta: { access: 'anyone' },
    component: () => import('@/views/ReleasesView.vue'),
  },
  {
    path: '/releases/:id',
    name: 'release',
    meta: { access: 'anyone' },
    component: () => import('@/views/ReleaseView.vue'),
  },
  {
    path: '/people',
    name: 'people',
    meta: { access: 'people' },
    component: () => import('@/views/PeopleView.vue'),
  },
  { path: '/labs', name: 'labs', meta: { access: 'labs' }, component: () => import('@/views/LabsView.vue') },
  {
    path: '/audit',
    name: 'audit',
    meta: { access: 'audit' },
    component: () => import('@/views/AuditView.vue'),
  },
  { path: '/tokens', name: 'tokens', component: () => import('@/views/TokensView.vue') },
  {
    path: '/:path(.*)*',
    name: 'not-found',
    meta: { access: 'anyone' },
    component: () => import('@/views/NotFoundView.vue'),
  },
];
