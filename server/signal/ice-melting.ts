const TRIPLE_K = 273.16;
const TRIPLE_PA = 611.657;
const LOWEST_K = 251.165;
const COEFFICIENTS = [
  [0.119539337e7, 3],
  [0.808183159e5, 25.75],
  [0.33382686e4, 103.75],
] as const;
const HALVINGS = 60;

/** cp of water at 0 °C, 4.2176 kJ/(kg K), over the latent heat of fusion, 333.43 kJ/kg. */
const ICE_PER_KELVIN = 0.01265;

/**
 * Pressure in Pa at which ice Ih melts at a temperature in K: p / pt = 1 + sum a_i (1 - theta^b_i), theta = T / 273.16 K.
 * Range: 251.165 K to 273.16 K; NaN outside of it.
 * Source: IAPWS R14-08(2011), equation 1.
 */
export function iceMeltingPressurePa(temperatureK: number): number {
  if (!(temperatureK >= LOWEST_K && temperatureK <= TRIPLE_K)) return Number.NaN;
  const theta = temperatureK / TRIPLE_K;
  return TRIPLE_PA * COEFFICIENTS.reduce((sum, [a, b]) => sum + a * (1 - theta ** b), 1);
}

/**
 * Melting point of pure water in °C at a pressure in Pa, by halving the interval of `iceMeltingPressurePa`. Below the
 * triple point's pressure its temperature is given, 0.01 °C; above that of 251.165 K (about 209 MPa) the answer is `null`,
 * since another ice melts there. NaN gives `null`.
 * Source: IAPWS R14-08(2011).
 */
export function waterMeltingPointC(pressurePa: number): number | null {
  if (!(pressurePa <= iceMeltingPressurePa(LOWEST_K))) return null;
  let [low, high] = [LOWEST_K, TRIPLE_K];
  for (let n = 0; n < HALVINGS; n++) {
    const middle = (low + high) / 2;
    // The melting point falls as the pressure rises.
    if (iceMeltingPressurePa(middle) > pressurePa) low = middle;
    else high = middle;
  }
  return high - 273.15;
}

/**
 * Share of the mass of pure water that freezes while its own latent heat warms it to the melting point, without heat lost:
 * cp / L times the supercooling in K, held within 0 and 1. NaN gives NaN.
 * Source: heat balance with cp = 4.2176 kJ/(kg K) and L = 333.43 kJ/kg at 0 °C.
 */
export function adiabaticIceShare(supercoolingK: number): number {
  return Math.min(1, Math.max(0, ICE_PER_KELVIN * supercoolingK));
}
