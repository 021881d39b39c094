// What a supplier states about its measurement besides the setup's figures: the instrument in words, and a temperature drift.

export interface Instrument {
  /** Analyser, in words. */
  readonly analyser?: string;
  /** Calibration method, in words. */
  readonly calibration?: string;
  /** "2026-11-27". */
  readonly calibratedOn?: string;
}

export interface StatedDrift {
  /** Of the frequencies, against temperature. */
  readonly ppmPerKelvin: number;
  /** The sign is not known: both count. */
  readonly either?: boolean;
  /** Relative rise of the conductor's resistance a kelvin; absent: none is taken. */
  readonly lossPerKelvin?: number;
}
