/** Password of the invented shop's people. The server binds to loopback only while anyone has it. */
export const demoPassword = 'let the pot ring'

/** Who can sign in to the invented shop, and what each is for. */
export const demoSignIns = [
  { email: 'sprayer@potbell.example', who: 'Sprayer', can: 'mixes at the bench and empties pots' },
  { email: 'foreman@potbell.example', who: 'Foreman', can: 'also approves what a rule forbids and keeps booths and guns' },
  { email: 'manager@potbell.example', who: 'Manager', can: 'also enters people and enrols screens and benches' },
] as const
