/** The cups that a reading may name. */
export const viscosityCups = [
  'din-4', 'iso-3', 'iso-4', 'iso-5', 'iso-6', 'ford-2', 'ford-3', 'ford-4', 'ford-5', 'zahn-1', 'zahn-2', 'zahn-3', 'zahn-4', 'zahn-5',
] as const
