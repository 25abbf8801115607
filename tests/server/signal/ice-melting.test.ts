import { describe, expect, test } from 'vitest';
import {
  adiabaticIceShare,
  iceMeltingPressurePa,
  waterMeltingPointC,
} from '../../../server/signal/ice-melting.ts';

describe('melting of ice', () => {
  test('at 260 K the melting pressure is 138.268 MPa', () => {
    // IAPWS R14-08(2011), check value of equation 1.
    expect(iceMeltingPressurePa(260) / 1e6).toBeCloseTo(138.268, 3);
  });

  test('at the pressure of the air the melting point is 273.152519 K', () => {
    // IAPWS R10-06(2009), Table 6: a state on the melting curve at 101325 Pa.
    expect(waterMeltingPointC(101_325)! + 273.15).toBeCloseTo(273.152_519, 5);
  });

  test.each([
    [-5, 59.983],
    [-10, 110.003],
    [-20, 193.704],
  ])('the melting point at %d °C belongs to %d MPa', (temperatureC, pressureMPa) => {
    // Pressures along the melting curve of IAPWS R14-08(2011).
    expect(waterMeltingPointC(pressureMPa * 1e6)).toBeCloseTo(temperatureC, 3);
  });

  test('below the pressure of the triple point its temperature is given', () => {
    expect(waterMeltingPointC(20)).toBeCloseTo(0.01, 9);
    expect(waterMeltingPointC(0)).toBeCloseTo(0.01, 9);
  });

  test('where another ice melts there is no answer', () => {
    expect(waterMeltingPointC(300e6)).toBeNull();
    expect(waterMeltingPointC(Number.NaN)).toBeNull();
    expect(iceMeltingPressurePa(240)).toBeNaN();
    expect(iceMeltingPressurePa(274)).toBeNaN();
  });

  test('5 K of supercooling freeze 6.3 % in the flash, and no more than all ever', () => {
    // Heat balance: 0.01265 per kelvin (cp 4.2176 kJ/(kg K), latent heat 333.43 kJ/kg; common practice).
    expect(adiabaticIceShare(5)).toBeCloseTo(0.063, 3);
    expect(adiabaticIceShare(1)).toBeCloseTo(4.2176 / 333.43, 5);
    expect(adiabaticIceShare(500)).toBe(1);
    expect(adiabaticIceShare(-1)).toBe(0);
  });
});
