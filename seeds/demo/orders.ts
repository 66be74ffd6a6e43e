import type { CutListName } from './cut-lists'

/** Work that comes in, in the order in which it does. Customers are invented. */
export interface DemoOrder {
  title: string
  customer: string
  schedule: string
  cut: CutListName
  size: number
}

const order = (title: string, customer: string, schedule: string, cut: CutListName, size: number): DemoOrder =>
  ({ title, customer, schedule, cut, size })

/** By the booth that does most of the work. */
export const orders: Record<1 | 2 | 3, readonly DemoOrder[]> = {
  1: [
    order('Kitchen with tall units, white', 'Joiner at Two Elms', 'FS-10', 'kitchen', 1),
    order('Wardrobe wall, smoked oak', 'House by the old mill', 'FS-20', 'wardrobe', 1),
    order('Reception counter, black gloss', 'Dentists on Quay Lane', 'FS-30', 'counter', 2),
    order('Kitchen, sage green', 'Joiner at Two Elms', 'FS-12', 'kitchen', 1),
    order('Lift lobby panels, graphite', 'Housing block Skovkrog', 'FS-60', 'panels', 2),
    order('Kitchen island and fronts, white', 'Kitchen fitters Nordhavre', 'FS-10', 'kitchen', 1),
    order('Shop display fronts, mirror', 'Optician Glasblik', 'FS-80', 'panels', 1),
    order('Wardrobes for four rooms, white', 'Guest house Marehalm', 'FS-10', 'wardrobe', 2),
    order('Library front desk, smoked oak', 'Library of Vangsted', 'FS-20', 'counter', 2),
    order('Bar counter, black gloss', 'Cafe Blue Door', 'FS-30', 'counter', 1),
    order('Tea kitchen, white', 'Office house Kornlofts', 'FS-10', 'kitchen', 1),
    order('Hallway wall, smoked oak', 'House by the old mill', 'FS-20', 'panels', 2),
    order('Kitchen with pantry, sage green', 'Kitchen fitters Nordhavre', 'FS-12', 'kitchen', 1),
    order('Stage panels, graphite', 'Theatre Lanternhus', 'FS-60', 'panels', 2),
    order('Fitted wardrobe under the stairs', 'Joiner at Two Elms', 'FS-10', 'wardrobe', 1),
    order('Kitchens of house 2, white', 'Housing block Skovkrog', 'FS-10', 'kitchen', 2),
    order('Hotel bar front, mirror', 'Guest house Marehalm', 'FS-80', 'panels', 1),
    order('Meeting table surround, smoked oak', 'Office house Kornlofts', 'FS-20', 'panels', 1),
    order('Pharmacy counter, black gloss', 'Pharmacy at the Well', 'FS-30', 'counter', 2),
    order('Utility room, sage green', 'Kitchen fitters Nordhavre', 'FS-12', 'wardrobe', 1),
    order('Kitchens of house 3, white', 'Housing block Skovkrog', 'FS-10', 'kitchen', 2),
    order('Cloakroom wall, graphite', 'Theatre Lanternhus', 'FS-60', 'panels', 1),
    order('Summer house kitchen, white', 'Joiner at Two Elms', 'FS-10', 'kitchen', 1),
    order('Study wall, smoked oak', 'House on the dyke', 'FS-20', 'shelving', 1),
    order('Tasting room counter, black gloss', 'Cider press Rodhegn', 'FS-30', 'counter', 1),
    order('Kitchen and dresser, sage green', 'House on the dyke', 'FS-12', 'kitchen', 1),
    order('Wardrobes for the annexe, white', 'Guest house Marehalm', 'FS-10', 'wardrobe', 2),
    order('Bathroom cabinets, white', 'Kitchen fitters Nordhavre', 'FS-10', 'wardrobe', 1),
    order('Bank hall panels, graphite', 'Savings bank Vangsted', 'FS-60', 'panels', 2),
    order('Staff kitchen, white', 'Savings bank Vangsted', 'FS-10', 'kitchen', 1),
    order('Music room wall, smoked oak', 'School at Lindehoj', 'FS-20', 'panels', 2),
    order('Ticket counter, black gloss', 'Theatre Lanternhus', 'FS-30', 'counter', 1),
    order('Kitchens of house 4, white', 'Housing block Skovkrog', 'FS-10', 'kitchen', 2),
    order('Mudroom benches, sage green', 'House on the dyke', 'FS-12', 'wardrobe', 1),
    order('Show kitchen, white', 'Kitchen fitters Nordhavre', 'FS-10', 'kitchen', 1),
    order('Corridor panels, smoked oak', 'Pharmacy at the Well', 'FS-20', 'panels', 1),
  ],
  2: [
    order('Nursery tables and benches', 'Nursery Small Oaks', 'FS-50', 'tables', 2),
    order('Bunk beds, eight', 'School camp Hyttemark', 'FS-50', 'beds', 4),
    order('Oak shelving, clear', 'Library of Vangsted', 'FS-55', 'shelving', 2),
    order('Straight staircase, beech', 'House on the dyke', 'FS-90', 'stairs', 1),
    order('Play corner, warm white', 'Dentists on Quay Lane', 'FS-50', 'boxes', 4),
    order('Dining tables, oak', 'Guest house Marehalm', 'FS-55', 'tables', 2),
    order('Two staircases, ash', 'Housing block Skovkrog', 'FS-90', 'stairs', 2),
    order('Cot ends and sides', 'Nursery Small Oaks', 'FS-50', 'beds', 2),
    order('Oak display shelves', 'Cider press Rodhegn', 'FS-55', 'shelving', 1),
    order('Class room tables', 'School at Lindehoj', 'FS-50', 'tables', 3),
    order('Gallery stair, oak', 'Theatre Lanternhus', 'FS-90', 'stairs', 1),
    order('Bedside shelves, oak', 'Guest house Marehalm', 'FS-55', 'shelving', 1),
    order('Changing units, warm white', 'Nursery Small Oaks', 'FS-50', 'wardrobe', 1),
    order('Reading room tables, oak', 'Library of Vangsted', 'FS-55', 'tables', 2),
    order('Cellar stair, beech', 'House by the old mill', 'FS-90', 'stairs', 1),
    order('Toy shelves, warm white', 'School camp Hyttemark', 'FS-50', 'shelving', 1),
    order('Kitchen shelves, oak', 'Cafe Blue Door', 'FS-55', 'shelving', 2),
    order('Junior beds, six', 'Nursery Small Oaks', 'FS-50', 'beds', 3),
    order('Window seats, oak', 'House on the dyke', 'FS-55', 'tables', 1),
    order('Attic stair, ash', 'House on the dyke', 'FS-90', 'stairs', 1),
    order('Craft tables, warm white', 'School at Lindehoj', 'FS-50', 'tables', 2),
    order('Wine shelves, oak', 'Guest house Marehalm', 'FS-55', 'shelving', 2),
    order('Main stair, oak', 'Office house Kornlofts', 'FS-90', 'stairs', 2),
    order('Cloakroom benches, warm white', 'School at Lindehoj', 'FS-50', 'tables', 2),
    order('Counter shelves, oak', 'Pharmacy at the Well', 'FS-55', 'shelving', 1),
    order('Doll house display, warm white', 'Toy shop Top and Hoop', 'FS-50', 'boxes', 3),
    order('Garden room shelves, oak', 'House by the old mill', 'FS-55', 'shelving', 1),
    order('Loft stair, beech', 'Housing block Skovkrog', 'FS-90', 'stairs', 1),
  ],
  3: [
    order('Archive shelving', 'Savings bank Vangsted', 'FS-40', 'shelving', 2),
    order('Plinths with ivory crackle', 'Museum of the Fjord', 'FS-70', 'boxes', 3),
    order('Wine bar shelving', 'Cafe Blue Door', 'FS-40', 'shelving', 1),
    order('Book cases, study', 'House by the old mill', 'FS-40', 'shelving', 2),
    order('Shop window boxes, ivory crackle', 'Toy shop Top and Hoop', 'FS-70', 'boxes', 2),
    order('Stock room shelves', 'Pharmacy at the Well', 'FS-40', 'shelving', 2),
    order('Side tables, satin', 'Guest house Marehalm', 'FS-40', 'tables', 2),
    order('Prop boxes, ivory crackle', 'Theatre Lanternhus', 'FS-70', 'boxes', 3),
    order('Record shelves', 'Cafe Blue Door', 'FS-40', 'shelving', 1),
    order('Workshop cabinets', 'School at Lindehoj', 'FS-40', 'shelving', 2),
    order('Costume chests, ivory crackle', 'Theatre Lanternhus', 'FS-70', 'boxes', 2),
    order('Display shelves, spectacles', 'Optician Glasblik', 'FS-40', 'shelving', 1),
    order('Map cases', 'Museum of the Fjord', 'FS-40', 'shelving', 2),
    order('Showcases, ivory crackle', 'Museum of the Fjord', 'FS-70', 'boxes', 3),
    order('Bench tops, satin', 'School camp Hyttemark', 'FS-40', 'tables', 2),
    order('Cellar shelving', 'Cider press Rodhegn', 'FS-40', 'shelving', 2),
    order('Jewellery stands, ivory crackle', 'Goldsmith at the Bridge', 'FS-70', 'boxes', 2),
    order('Office book cases', 'Office house Kornlofts', 'FS-40', 'shelving', 1),
    order('Key cabinet and shelves', 'Guest house Marehalm', 'FS-40', 'shelving', 1),
    order('Sample boxes, ivory crackle', 'Goldsmith at the Bridge', 'FS-70', 'boxes', 2),
  ],
}

/** What a loose mix was for, with its mix and whole grams. */
export const looseMixes: readonly { purpose: string, mix: string, grams: number }[] = [
  { purpose: 'Colour sample for a customer', mix: 'AS-10', grams: 220 },
  { purpose: 'Touch-up of a transport scratch', mix: 'AW-80', grams: 180 },
  { purpose: 'Sample board, gloss', mix: 'AG-80', grams: 260 },
  { purpose: 'Spray test after a new nozzle', mix: 'US-40', grams: 400 },
  { purpose: 'Filled edges before sealing', mix: 'PG-2', grams: 600 },
  { purpose: 'Adhesion test, warm white', mix: 'WW-10', grams: 300 },
  { purpose: 'Repair of a table from last year', mix: 'NT-50', grams: 450 },
  { purpose: 'Frost sample for a shop fitter', mix: 'CR-10', grams: 240 },
  { purpose: 'Handrail sample', mix: 'CV-5', grams: 350 },
  { purpose: 'Training: pouring against the scale', mix: 'WT-10', grams: 300 },
  { purpose: 'Filled end grain of counter tops', mix: 'PG-2', grams: 800 },
  { purpose: 'Stain sample on oak', mix: 'ST-600', grams: 350 },
]
