/** The pages that the bars offer, in their order. */
export const pages = [
  { name: 'watch', title: 'Watch', keys: 'g w' },
  { name: 'stations', title: 'Stations', keys: 'g s' },
] as const
