/** Two invented tariffs of the demo as open URDB JSON records, read by the same import that a landlord uses. */

const MONTHS = 12
const HOURS = 24

/** A 12 × 24 grid from a function of month (0 = January) and hour. */
const grid = (periodOf: (month: number, hour: number) => number): number[][] =>
  Array.from({ length: MONTHS }, (_, month) => Array.from({ length: HOURS }, (_, hour) => periodOf(month, hour)))

/** Off-peak 0, peak 1: morning 07–10 and evening 17–20 on weekdays, all year; a demand charge on the month's highest quarter hour. */
export const PORT_ALDANE_RATE = {
  label: 'demo-port-aldane-gs-2',
  utility: 'Port Aldane Light (invented)',
  name: 'General Service 2, time of use',
  sector: 'Commercial',
  startdate: 1_735_689_600,
  energyratestructure: [[{ rate: 0.1148, adj: 0.0062, unit: 'kWh' }], [{ rate: 0.2874, adj: 0.0062, unit: 'kWh' }]],
  energyweekdayschedule: grid((_, hour) => ((hour >= 7 && hour < 10) || (hour >= 17 && hour < 20) ? 1 : 0)),
  energyweekendschedule: grid(() => 0),
  flatdemandstructure: [[{ rate: 6.4 }]],
  flatdemandmonths: Array.from({ length: MONTHS }, () => 0),
  flatdemandunit: 'kW',
  demandwindow: 15,
  fixedchargefirstmeter: 34.5,
  fixedchargeunits: '$/month',
}

/** Night 0, day 1, evening peak 2 (16–19 on weekdays). */
export const WEXHOLT_RATE = {
  label: 'demo-wexholt-three-rate',
  utility: 'Wexholt Electric (invented)',
  name: 'Landlord supply, three rates',
  sector: 'Commercial',
  startdate: 1_735_689_600,
  energyratestructure: [[{ rate: 0.142, unit: 'kWh' }], [{ rate: 0.256, unit: 'kWh' }], [{ rate: 0.419, unit: 'kWh' }]],
  energyweekdayschedule: grid((_, hour) => (hour < 7 ? 0 : hour >= 16 && hour < 19 ? 2 : 1)),
  energyweekendschedule: grid((_, hour) => (hour < 7 ? 0 : 1)),
  fixedchargefirstmeter: 0.62,
  fixedchargeunits: '$/day',
}
