/** Cautions and flags that hold until the office has its own. Nothing here says that a place is safe. */
import type { PlaceCautions } from '../schemas/placeCautions.ts'
import type { FlagSet } from '../schemas/placeNotice.ts'

const single = 'Single waves reach nearly twice the significant height.'

export const usualPlaceCautions: PlaceCautions = {
  placeHeight: `Carried from an array that sees the sea where it stands, not here. ${single}`,
  crossSea: `Figures support, never replace, the master’s and pilot’s judgement, local notices and licensed pilotage. ${single}`,
  alongSea: `Figures support, never replace, the master’s and pilot’s judgement, local notices and licensed pilotage. ${single}`,
  overtopping:
    'The largest single wave knocks people over, not the mean. Closing is the decision of the harbour. A screening within a factor of three at best; no figure says that the crest may be entered.',
  largestVolume:
    'A likely size, not an upper bound: a single wave may bring more. The largest single wave knocks people over. Closing is the decision of the harbour.',
  longSwell:
    'Ship movement depends on lines, load and fenders, not on this figure alone. The berthing master decides. Figures support, never replace, licensed practice.',
  breakerHeight: `A caution, not a flag decision: the lifeguard on the beach decides. ${single} Calm figures do not mean safe bathing.`,
  runUp:
    'Two in a hundred waves run higher, and single ones much higher. The profile changes with every storm. Keep off the wash below steep faces and rocks.',
  setUp: 'The mean level at the shore alone: waves run up far above it. The profile changes with every storm.',
  longshoreCurrent:
    'An even, straight beach is assumed. Rips, structures, tide and wind make stronger currents that this figure does not know. Calm figures do not mean safe bathing.',
  rip: 'Listed reasons, not a forecast and not a flag decision: the lifeguard on the beach decides. Rips also occur with none of these.',
  onDuty:
    'A caution, not a flag decision. On duty until {until} local: the lifeguard on the beach decides. Calm figures do not mean safe bathing.',
  offDuty:
    'No lifeguard on duty now, next from {from} local. Rips and single large waves occur in every sea. Calm figures do not mean safe bathing.',
}

/**
 * Flags as the International Life Saving Federation's policy of 2004 and ISO 20712-2 have them (double red, purple and wind-sock from
 * memory). Sets differ between coasts: the local authority's goes before it.
 */
export const usualFlagSet: FlagSet = {
  source:
    'ILS beach safety flags 2004 and ISO 20712-2, some from memory; put the local lifeguard authority’s set in its place',
  flags: [
    {
      key: 'redOverYellow',
      name: 'Red over yellow',
      colours: ['red', 'yellow'],
      count: 1,
      meaning: 'Lifeguards on duty; in pairs they mark the bathing zone.',
    },
    { key: 'yellow', name: 'Yellow', colours: ['yellow'], count: 1, meaning: 'Medium hazard: weak swimmers stay out.' },
    { key: 'red', name: 'Red', colours: ['red'], count: 1, meaning: 'High hazard: do not enter the water.' },
    { key: 'doubleRed', name: 'Double red', colours: ['red'], count: 2, meaning: 'The water is closed to the public.' },
    {
      key: 'blackWhiteQuarters',
      name: 'Black and white quarters',
      colours: ['black', 'white', 'white', 'black'],
      count: 1,
      meaning: 'Zone for surfcraft: no bathing.',
    },
    { key: 'purple', name: 'Purple', colours: ['purple'], count: 1, meaning: 'Marine pests are present.' },
    {
      key: 'orangeWindsock',
      name: 'Orange wind-sock',
      colours: ['orange'],
      count: 1,
      meaning: 'Offshore wind: no inflatables.',
    },
    {
      key: 'noFlag',
      name: 'No flag',
      colours: ['white'],
      count: 1,
      meaning: 'No lifeguard on duty: nobody watches the water.',
    },
  ],
}
