/** What the invented shop stands on. Figures are common practice, no source. */

export const shop = { name: 'Kridtvang Finishing', zone: 'Europe/Copenhagen', currency: 'EUR' }

/** Local times of the shop; Monday is 1. */
export const workingHours = { days: [1, 2, 3, 4, 5], from: '07:00', to: '16:00', breaks: [{ from: '11:30', to: '12:00' }] }

/** `trainedDays`: how long the isocyanate training is still valid, from the day of founding on. */
export const people = [
  { key: 'TV', email: 'sprayer@potbell.example', name: 'Tilda Vestkrog', role: 'sprayer', signsIn: true, trainedDays: 610 },
  { key: 'BE', email: 'foreman@potbell.example', name: 'Bo Ellemark', role: 'foreman', signsIn: true, trainedDays: 940 },
  { key: 'RF', email: 'manager@potbell.example', name: 'Runa Falkdal', role: 'manager', signsIn: true, trainedDays: null },
  { key: 'JK', email: 'jonas@potbell.example', name: 'Jonas Kalklund', role: 'sprayer', signsIn: false, trainedDays: 410 },
  { key: 'PA', email: 'pernille@potbell.example', name: 'Pernille Askeby', role: 'sprayer', signsIn: false, trainedDays: 38 },
  { key: 'ES', email: 'emin@potbell.example', name: 'Emin Solvang', role: 'sprayer', signsIn: false, trainedDays: 1210 },
  { key: 'VT', email: 'viggo@potbell.example', name: 'Viggo Tranmose', role: 'sprayer', signsIn: false, trainedDays: null },
] as const

export const booths = [
  { key: 1, name: 'Booth 1', clearanceMin: '24', measured: true, extraction: 'running' },
  { key: 2, name: 'Booth 2', clearanceMin: '30', measured: false, extraction: 'running' },
  { key: 3, name: 'Booth 3', clearanceMin: '18', measured: true, extraction: 'running' },
] as const
export type BoothKey = (typeof booths)[number]['key']

/** Who sprays where; isocyanates only by those who are trained. */
export const crews: Record<BoothKey, readonly string[]> = { 1: ['TV', 'JK'], 2: ['PA', 'ES'], 3: ['ES', 'VT'] }

/** Transfer efficiency in per cent by shape of work, pace in m²/h with turning and racking. */
export const guns = [
  { key: 1, name: 'Gun 1', kind: 'cup-gun', nozzle: '1.4', booth: 1, flat: '58', frames: '45', sticks: '31', measured: true, residue: '24', fill: '150', flow: '190', pace: '9.5' },
  { key: 2, name: 'Gun 2', kind: 'pressure-pot', nozzle: '1.1', booth: 1, flat: '63', frames: '50', sticks: '36', measured: true, residue: '115', fill: '600', flow: '310', pace: '14' },
  { key: 3, name: 'Gun 3', kind: 'cup-gun', nozzle: '2.2', booth: 1, flat: '66', frames: '55', sticks: '40', measured: false, residue: '32', fill: '200', flow: '240', pace: '8' },
  { key: 4, name: 'Gun 4', kind: 'pump', nozzle: '0.28', booth: 2, flat: '71', frames: '58', sticks: '42', measured: true, residue: '260', fill: '1200', flow: '420', pace: '18' },
  { key: 5, name: 'Gun 5', kind: 'cup-gun', nozzle: '1.3', booth: 2, flat: '55', frames: '43', sticks: '30', measured: false, residue: '22', fill: '150', flow: '170', pace: '8.5' },
  { key: 6, name: 'Gun 6', kind: 'cup-gun', nozzle: '1.2', booth: 3, flat: '52', frames: '40', sticks: '28', measured: false, residue: '20', fill: '120', flow: '160', pace: '9' },
  { key: 7, name: 'Gun 7', kind: 'pressure-pot', nozzle: '1.0', booth: 3, flat: '60', frames: '47', sticks: '33', measured: true, residue: '105', fill: '600', flow: '280', pace: '13' },
] as const
export type GunKey = (typeof guns)[number]['key']

export const scales = [
  { key: 'fine', name: 'Bench 1 scale', source: 'keypad', division: '0.1', capacity: '6200', mpe: null, class: 'II', interval: '0.1', checkDays: 96 },
  { key: 'coarse', name: 'Bench 2 scale', source: 'keypad', division: '1', capacity: '15000', mpe: '1', class: null, interval: null, checkDays: 12 },
  { key: 'practice', name: 'Practice scale', source: 'simulated', division: '0.1', capacity: '6200', mpe: null, class: null, interval: null, checkDays: 180 },
] as const
export type ScaleKey = (typeof scales)[number]['key']

/** Millilitres. */
export const mixingCups = [
  { name: 'Paper cup 0.4 L', capacity: '400', fillLine: '340' },
  { name: 'Cup 1 L', capacity: '1000', fillLine: '850' },
  { name: 'Cup 2.3 L', capacity: '2300', fillLine: '2000' },
  { name: 'Pail 5 L', capacity: '5000', fillLine: '4400' },
  { name: 'Pail 10 L', capacity: '10000', fillLine: '9000' },
] as const
