/** Time of a sample's start in seconds: n / fs. */
export function samplesToSeconds(samples: number, sampleRateHz: number): number {
  requirePositive('sampleRateHz', sampleRateHz);
  return samples / sampleRateHz;
}

/** The sample nearest to a time: round(t fs), half away from the earlier one. */
export function secondsToSample(seconds: number, sampleRateHz: number): number {
  requirePositive('sampleRateHz', sampleRateHz);
  return Math.round(seconds * sampleRateHz);
}

/** 20 log10(|a|) for an amplitude re full scale (1); `null` for silence, which has no level. */
export function amplitudeToDb(amplitude: number): number | null {
  return amplitude === 0 ? null : 20 * Math.log10(Math.abs(amplitude));
}

/** 10^(L/20): the amplitude re full scale of a level in dB. */
export function dbToAmplitude(levelDb: number): number {
  return 10 ** (levelDb / 20);
}

/** 10 log10(p) for a power; `null` for none. */
export function powerToDb(power: number): number | null {
  return power === 0 ? null : 10 * Math.log10(power);
}

/**
 * Level of an rms value in dB re full scale, where a full-scale sine has 0 dB and a full-scale square +3.01 dB:
 * 20 log10(rms sqrt 2); `null` for silence.
 * Source: AES17, AES standard method for digital audio engineering: measurement of digital audio equipment (full-scale amplitude).
 */
export function rmsToDb(rms: number): number | null {
  return amplitudeToDb(rms * Math.SQRT2);
}

/**
 * Highest ratio of a full-scale sine to its rounding noise: 20 log10(2^N sqrt 1.5) = 6.0206 N + 1.7609 dB.
 * @param bits number of bits N, 1 or more
 * Source: W. R. Bennett (1948), Spectra of quantized signals, Bell Syst. Tech. J. 27:446.
 */
export function quantisationSnrDb(bits: number): number {
  requirePositive('bits', bits);
  return 20 * Math.log10(2 ** bits * Math.sqrt(1.5));
}

/** Volts at the recorder's input of an amplitude re full scale. */
export function amplitudeToVolts(amplitude: number, voltsAtFullScale: number): number {
  requirePositive('voltsAtFullScale', voltsAtFullScale);
  return amplitude * voltsAtFullScale;
}

/** Amplitude re full scale of a voltage at the recorder's input. */
export function voltsToAmplitude(volts: number, voltsAtFullScale: number): number {
  requirePositive('voltsAtFullScale', voltsAtFullScale);
  return volts / voltsAtFullScale;
}

/**
 * Acoustic-emission level re 1 microvolt at the sensor: 20 log10(V / 1 uV) - gain; `null` for 0 V.
 * @param volts voltage after the preamplifier, either sign
 * @param preampGainDb gain of the preamplifier in dB
 * Source: ASTM E1316, section B (dB(AE)).
 */
export function dbAe(volts: number, preampGainDb: number): number | null {
  return volts === 0 ? null : 20 * Math.log10(Math.abs(volts) / 1e-6) - preampGainDb;
}

/**
 * Where a tone appears after sampling: |f - round(f / fs) fs|, between 0 and fs / 2.
 * Source: Shannon (1949), Communication in the presence of noise; Oppenheim and Schafer, Discrete-Time Signal Processing, 4.2.
 */
export function aliasFrequencyHz(frequencyHz: number, sampleRateHz: number): number {
  requirePositive('sampleRateHz', sampleRateHz);
  return Math.abs(frequencyHz - Math.round(frequencyHz / sampleRateHz) * sampleRateHz);
}

/** Where a tone is heard when played `slow` times slower: f / k. */
export function slowedFrequencyHz(frequencyHz: number, slow: number): number {
  requirePositive('slow', slow);
  return frequencyHz / slow;
}

/** Where a tone is heard after mixing with a carrier: |f - c|. */
export function shiftedFrequencyHz(frequencyHz: number, carrierHz: number): number {
  return Math.abs(frequencyHz - carrierHz);
}

function requirePositive(name: string, value: number): void {
  if (!(value > 0)) throw new RangeError(`${name} ${value} must be above 0`);
}
