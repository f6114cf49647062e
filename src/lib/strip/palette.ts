/** The light theme's colours as values, for pictures that travel without the style sheet; a test holds them equal to it. */
import type { StripColours } from './day-strip.ts'

export const ZINC: StripColours = {
  paper: '#e8edef',
  rule: '#c1ccd1',
  soft: '#4d6068',
  copper: '#a8481f',
  copperWash: '#f0cfbb',
  verdigris: '#146b5c',
  well: '#1f5f8b',
  sheet: '#f7f9fa',
  dusk: '#56468f',
  duskWash: '#ddd8ee',
  crimson: '#a3123a',
}
