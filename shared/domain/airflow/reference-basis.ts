/**
 * The one basis every flow in the program is brought to: 28 inches of water (conventional, 249.08891 Pa each)
 * and air of 1.2041 kg/m3. Source: handbook 4.2.
 */
export const referenceBasis = {
  pressurePa: 28 * 249.08891,
  densityKgPerM3: 1.2041,
} as const
