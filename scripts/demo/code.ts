/**
 * What the invented code base is like at a commit: constants and formulas of its models, and how its derivative code
 * is written. A commit of the history sets some of these; a mistake is a setting in which derivative and model part.
 */
export interface Code {
  /** Design flow speed, m/s. */
  readonly flowSpeed: number;
  /** Exponent of the stall law of the blade section. */
  readonly stallExponent: 4 | 6;
  readonly tipLoss: boolean;
  /** Growth of a wake per metre downstream, dimensionless. */
  readonly wakeGrowth: number;
  /** Cost of a metre of cable, thousand euro a kilometre and root megawatt. */
  readonly cableCost: number;
  /** The depth is clipped to its valid range, by code that keeps the real part alone. */
  readonly clipsDepth: boolean;

  /** The lift's derivative turns degrees to radians. */
  readonly liftInRadians: boolean;
  readonly thrustKnowsTipLoss: boolean;
  /** Sign that the torque's derivative gives to the oil temperature's friction term. */
  readonly temperatureSign: 1 | -1;
  /** The torque's derivative takes the gear's efficiency for per cent. */
  readonly efficiencyInPercent: boolean;
  /** Sweeps of the iteration in the mooring's derivative. */
  readonly mooringSweeps: number;
  /** Which transect the wake's derivative fills in which place. */
  readonly transects: readonly number[];
  /** The wake's derivative keeps site coordinates in double precision. */
  readonly coordinatesInDouble: boolean;
  /** The price's derivative has the term of the cable. */
  readonly priceKnowsCable: boolean;
}

export const FIRST_CODE: Code = {
  flowSpeed: 2.3,
  stallExponent: 4,
  tipLoss: false,
  wakeGrowth: 0.028,
  cableCost: 410,
  clipsDepth: false,
  liftInRadians: true,
  thrustKnowsTipLoss: true,
  temperatureSign: 1,
  efficiencyInPercent: false,
  mooringSweeps: 34,
  transects: [0, 1, 2, 3, 4, 5],
  coordinatesInDouble: true,
  priceKnowsCable: true,
};
