import { bladeSection } from "./bladeSection.ts";
import { energyCost, energyYield } from "./costEnergy.ts";
import { drivetrainTorque } from "./drivetrainTorque.ts";
import { mooringTension } from "./mooringTension.ts";
import { rotorPower, rotorThrust } from "./rotorThrust.ts";
import { wakeDeficit } from "./wakeDeficit.ts";

/** Six models of the invented code base, as eight blocks. */
export const MODELS = [
  bladeSection,
  rotorThrust,
  rotorPower,
  drivetrainTorque,
  mooringTension,
  wakeDeficit,
  energyCost,
  energyYield,
] as const;
