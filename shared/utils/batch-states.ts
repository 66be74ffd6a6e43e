/** What a sealed batch may be. `no-pot-life`: nothing in it reacts, so nothing runs. */
export const batchStates = ['fresh', 'closing', 'life-up', 'emptied', 'stopped', 'no-pot-life'] as const
