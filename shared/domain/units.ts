/**
 * Units that engineering codes mix up, by dimension.
 *
 * Factors are the exact ones, rounded once to binary64 (inch 0.0254 m, pound 0.45359237 kg, g_n 9.80665 m/s^2,
 * IT calorie 4.1868 J, US gallon 231 in^3).
 * Source: A. Thompson, B. N. Taylor, Guide for the Use of the International System of Units (SI), NIST SP 811, 2008,
 * appendix B.8.
 */
export interface Unit {
  /** Plural, as it is said in a sentence: `degrees where radians are meant`. */
  readonly name: string;
  /** What is posted for it, case told apart; the first is the usual one. */
  readonly symbols: readonly string[];
  /** Value of the unit in the base unit of its dimension. */
  readonly factor: number;
}

export interface Dimension {
  readonly name: string;
  /** The base unit (factor 1) comes first. */
  readonly units: readonly Unit[];
}

const unit = (name: string, factor: number, ...symbols: string[]): Unit => ({ name, factor, symbols });

export const DIMENSIONS: readonly Dimension[] = [
  {
    name: "angle",
    units: [
      unit("radians", 1, "rad", "radian", "radians"),
      unit("degrees", Math.PI / 180, "deg", "degree", "degrees", "°"),
      unit("minutes of arc", Math.PI / 10_800, "arcmin"),
      unit("seconds of arc", Math.PI / 648_000, "arcsec"),
      unit("gons", Math.PI / 200, "gon", "grad"),
      unit("revolutions", 2 * Math.PI, "rev", "cycle", "turn"),
    ],
  },
  {
    name: "angular speed",
    units: [
      unit("radians per second", 1, "rad/s"),
      unit("revolutions per minute", Math.PI / 30, "rpm", "r/min", "rev/min"),
      unit("degrees per second", Math.PI / 180, "deg/s", "°/s"),
      unit("revolutions per second", 2 * Math.PI, "Hz", "rev/s", "rps"),
    ],
  },
  {
    name: "length",
    units: [
      unit("metres", 1, "m", "metre", "meter"),
      unit("millimetres", 1e-3, "mm"),
      unit("centimetres", 1e-2, "cm"),
      unit("kilometres", 1e3, "km"),
      unit("inches", 0.0254, "in", "inch", '"'),
      unit("feet", 0.3048, "ft", "foot", "feet"),
      unit("yards", 0.9144, "yd", "yard"),
      unit("miles", 1609.344, "mi", "mile"),
      unit("nautical miles", 1852, "nmi"),
    ],
  },
  {
    name: "area",
    units: [
      unit("square metres", 1, "m2", "m^2", "m²"),
      unit("square millimetres", 1e-6, "mm2", "mm^2", "mm²"),
      unit("square inches", 0.000_645_16, "in2", "in^2", "in²"),
      unit("square feet", 0.092_903_04, "ft2", "ft^2", "ft²"),
    ],
  },
  {
    name: "volume",
    units: [
      unit("cubic metres", 1, "m3", "m^3", "m³"),
      unit("litres", 1e-3, "L", "l", "litre", "liter"),
      unit("US gallons", 0.003_785_411_784, "gal", "gallon"),
      unit("imperial gallons", 0.004_546_09, "gal (imp)"),
      unit("cubic feet", 0.028_316_846_592, "ft3", "ft^3", "ft³"),
    ],
  },
  {
    name: "speed",
    units: [
      unit("metres per second", 1, "m/s"),
      unit("kilometres per hour", 1 / 3.6, "km/h", "kph"),
      unit("knots", 1852 / 3600, "kn", "kt", "knot", "knots"),
      unit("miles per hour", 0.447_04, "mph", "mi/h"),
      unit("feet per second", 0.3048, "ft/s", "fps"),
    ],
  },
  {
    name: "acceleration",
    units: [
      unit("metres per second squared", 1, "m/s2", "m/s^2", "m/s²"),
      unit("standard gravities", 9.806_65, "g0", "g_n"),
      unit("feet per second squared", 0.3048, "ft/s2", "ft/s^2", "ft/s²"),
    ],
  },
  {
    name: "mass",
    units: [
      unit("kilograms", 1, "kg"),
      unit("grams", 1e-3, "g"),
      unit("tonnes", 1e3, "t", "tonne"),
      unit("pounds", 0.453_592_37, "lb", "lbm"),
      unit("slugs", 14.593_902_937_206_364, "slug"),
    ],
  },
  {
    name: "force",
    units: [
      unit("newtons", 1, "N", "newton"),
      unit("kilonewtons", 1e3, "kN"),
      unit("pounds-force", 4.448_221_615_260_5, "lbf"),
      unit("kilograms-force", 9.806_65, "kgf", "kp"),
    ],
  },
  {
    name: "torque",
    units: [
      unit("newton metres", 1, "N m", "Nm", "N*m", "N·m"),
      unit("foot pounds-force", 1.355_817_948_331_400_3, "ft lbf", "ft*lbf", "lbf ft", "lbf*ft"),
      unit("inch pounds-force", 0.112_984_829_027_616_7, "in lbf", "lbf in", "lbf*in"),
    ],
  },
  {
    name: "pressure",
    units: [
      unit("pascals", 1, "Pa", "pascal", "N/m2", "N/m^2", "N/m²"),
      unit("kilopascals", 1e3, "kPa"),
      unit("megapascals", 1e6, "MPa", "N/mm2", "N/mm^2", "N/mm²"),
      unit("bars", 1e5, "bar"),
      unit("atmospheres", 101_325, "atm"),
      unit("torrs", 101_325 / 760, "Torr", "torr", "mmHg"),
      unit("pounds-force per square inch", 6894.757_293_168_362, "psi", "lbf/in2", "lbf/in^2"),
    ],
  },
  {
    name: "energy",
    units: [
      unit("joules", 1, "J", "joule"),
      unit("kilojoules", 1e3, "kJ"),
      unit("kilowatt hours", 3.6e6, "kWh", "kW h"),
      unit("thermochemical calories", 4.184, "cal_th", "cal"),
      unit("IT calories", 4.1868, "cal_IT"),
      unit("IT British thermal units", 1055.055_852_62, "Btu", "BTU", "Btu_IT"),
      unit("thermochemical British thermal units", 1054.350_264_488_888_8, "Btu_th"),
    ],
  },
  {
    name: "power",
    units: [
      unit("watts", 1, "W", "watt"),
      unit("kilowatts", 1e3, "kW"),
      unit("megawatts", 1e6, "MW"),
      unit("horsepower", 745.699_871_582_270_2, "hp"),
      unit("tons of refrigeration", 3516.852_842_066_666_7, "ton (refrigeration)"),
    ],
  },
  {
    name: "time",
    units: [
      unit("seconds", 1, "s", "sec"),
      unit("minutes", 60, "min"),
      unit("hours", 3600, "h", "hr", "hour"),
      unit("days", 86_400, "d", "day"),
    ],
  },
  {
    name: "temperature",
    units: [unit("kelvins", 1, "K", "°C", "degC"), unit("degrees Fahrenheit", 5 / 9, "°F", "degF", "°R", "degR")],
  },
  { name: "share", units: [unit("shares of one", 1, "1", "-"), unit("per cent", 0.01, "%", "percent", "per cent")] },
];

export interface KnownUnit {
  readonly dimension: string;
  readonly unit: Unit;
}

const BY_SYMBOL: ReadonlyMap<string, KnownUnit> = new Map(
  DIMENSIONS.flatMap(({ name, units }) =>
    units.flatMap((one) => one.symbols.map((symbol) => [symbol, { dimension: name, unit: one }] as const)),
  ),
);

/** The unit that a posted symbol stands for, or null where it is not among the known ones. */
export function unitOf(symbol: string | null): KnownUnit | null {
  return symbol === null ? null : (BY_SYMBOL.get(symbol.trim()) ?? null);
}
