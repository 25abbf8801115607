import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import { createMemoryHistory, createRouter } from 'vue-router';
import { homeSectionKeySchema } from '@shared/contract/home.ts';
import type { Home } from '@shared/contract/home.ts';
import { rolesInFull, rolesInShort } from '@/components/app/role-words.ts';
import HomeSectionList from '@/components/home/HomeSectionList.vue';
import { routes } from '@/router/routes.ts';
import { homeHeadline, homeLead, sectionWords } from '@/components/home/home-words.ts';

const router = createRouter({ history: createMemoryHistory(), routes });

function homeWith(totals: Partial<Record<Home['sections'][number]['key'], number>>): Home {
  const sections = Object.entries(totals).map(([key, total]) => ({
    key: homeSectionKeySchema.parse(key),
    total,
    items: [],
  }));
  return { sections };
}

describe('the headline of the home page', () => {
  it('counts what waits for this person', () => {
    expect(homeHeadline(homeWith({ 'to-decide': 2, 'my-passes': 1 }))).toBe('Three things wait for you');
    expect(homeHeadline(homeWith({ 'my-passes': 1 }))).toBe('One thing waits for you');
    expect(homeHeadline(homeWith({ 'my-passes': 0 }))).toBe('Nothing waits for you');
  });

  it('does not count what waits for somebody else', () => {
    expect(homeHeadline(homeWith({ 'held-mine': 4 }))).toBe('Nothing waits for you');
  });

  it('says in the lead what it is', () => {
    const lead = homeLead(homeWith({ 'to-decide': 2, 'my-passes': 1 })).replace(/\u00A0/g, ' ');
    expect(lead).toBe('2 held uploads to decide and 1 pass to finish.');
  });
});

describe('a section of the home page', () => {
  it.each(homeSectionKeySchema.options)('%s says what to do when nothing is in it', (key) => {
    const props = { section: { key, total: 0, items: [] } };
    const wrapper = mount(HomeSectionList, { props, global: { plugins: [router] } });
    expect(wrapper.text()).toContain(sectionWords[key].emptyTitle);
    expect(wrapper.text()).toContain(sectionWords[key].emptyHint);
  });

  it('links each thing to the page where it is done', () => {
    const item = { id: '1', title: 'Film 07', detail: 'rounds', href: '/bench/1', at: null };
    const props = { section: { key: 'my-passes' as const, total: 12, items: [item] } };
    const wrapper = mount(HomeSectionList, { props, global: { plugins: [router] } });
    expect(wrapper.find('li a').attributes('href')).toBe('/bench/1');
    expect(wrapper.text()).toContain('and 11 more');
  });
});

describe('roles in words', () => {
  const inLab = (role: 'contributor' | 'reviewer') => ({ labName: 'Northlight', role });

  it('are short beside the name', () => {
    expect(rolesInShort({ roles: [], memberships: [] })).toBe('reader');
    expect(rolesInShort({ roles: ['labeler'], memberships: [inLab('contributor')] })).toBe(
      'labeler, contributor',
    );
    expect(rolesInShort({ roles: ['labeler', 'curator'], memberships: [inLab('reviewer')] })).toBe('3 roles');
  });

  it('name the lab in full', () => {
    expect(rolesInFull({ roles: [], memberships: [inLab('reviewer')] })).toEqual(['reviewer at Northlight']);
  });
});
