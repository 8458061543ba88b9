// Limits compiled into the program from published guidance: no site and no prescription can exceed them. Plain
// constants with their source, so that the database can repeat them as CHECK constraints. No decisions here.

export type Ceiling = { readonly value: number; readonly unit: string; readonly source: string };

export const ceilings = {
  /** Peak current, baseline to peak, offset included, in mA. */
  currentMilliamp: { value: 4, unit: 'mA', source: 'Bikson et al. 2016; Antal et al. 2017, 2026' },
  /** Time with current on, ramps included, a session, in min. */
  minutes: { value: 40, unit: 'min', source: 'Bikson et al. 2016' },
  /** Charge a session, in C. */
  chargeCoulomb: { value: 7.2, unit: 'C', source: 'Bikson et al. 2016' },
  /** Peak current over area at a pad, in mA/cm² (4 mA on 25 cm²). */
  densityMilliampPerSquareCentimetre: { value: 0.16, unit: 'mA/cm²', source: 'own choice' },
  /** Time with current on in a day, planned, and in any 24 h, delivered, in min. */
  minutesPerDay: { value: 60, unit: 'min', source: 'Antal et al. 2017, 2026' },
  /** Peak current under 18 years, whatever a site sets, in mA. */
  minorCurrentMilliamp: { value: 2, unit: 'mA', source: 'own choice after Buchanan et al. 2021, Kessler et al. 2013' },
  /** Nobody younger, in years. */
  leastAgeYears: { value: 12, unit: 'years', source: 'own choice' },
  adultAgeYears: { value: 18, unit: 'years', source: 'common practice' },
  /** Shortest and longest ramp, each way, in s: a step is felt. */
  leastRampSeconds: { value: 10, unit: 's', source: 'common practice, number own choice' },
  mostRampSeconds: { value: 120, unit: 's', source: 'own choice' },
  /** tACS, in Hz: slower, a sine is as good as direct current. */
  leastFrequencyHertz: { value: 0.5, unit: 'Hz', source: 'own choice' },
  mostFrequencyHertz: { value: 200, unit: 'Hz', source: 'own choice' },
  /** tRNS band, in Hz; usual are 0.1 to 640 and 100 to 640. */
  leastBandHertz: { value: 0.1, unit: 'Hz', source: 'own choice' },
  mostBandHertz: { value: 1000, unit: 'Hz', source: 'own choice' },
  /** Small gel (ring) electrodes, where a protocol switches them on. */
  ringLeastAreaSquareCentimetre: { value: 1, unit: 'cm²', source: 'Minhas et al. 2010' },
  ringMostCurrentMilliamp: { value: 2, unit: 'mA', source: 'Minhas et al. 2010' },
  ringMostMinutes: { value: 22, unit: 'min', source: 'Minhas et al. 2010' },
  /** Charge in any 24 h and any 7 days with two signatures, in C. */
  charge24hCoulomb: { value: 14.4, unit: 'C', source: 'own choice: two sessions at the ceiling' },
  charge7dCoulomb: { value: 50.4, unit: 'C', source: 'own choice: seven sessions at the ceiling' },
  /** A gap between sessions shorter than this is refused, in h. */
  leastGapHours: { value: 4, unit: 'h', source: 'own choice' },
} as const satisfies Record<string, Ceiling>;
