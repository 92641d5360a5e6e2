/** Mass in g of a volume in mm3 at a density in g/cm3. */
export function massG(volumeMm3: number, densityGPerCm3: number): number {
  return (volumeMm3 / 1000) * densityGPerCm3;
}

/** Volume in mm3 of a mass in g at a density in g/cm3. */
export function volumeMm3(mass: number, densityGPerCm3: number): number {
  return (mass / densityGPerCm3) * 1000;
}

/** What must go in so that `net` is left when a share of it is lost: net / (1 - loss). */
export function beforeLoss(net: number, loss: number): number {
  return net / (1 - loss);
}

/**
 * How much larger the pattern is than the casting, by the contraction convention: 1 / (1 - s), where s is the linear
 * contraction of the metal as a share of the pattern. The shrink rule's 1 + s is smaller by about s squared.
 */
export function patternScale(contraction: number): number {
  return beforeLoss(1, contraction);
}
