import { assumed, calculation, given, heading, line, paragraph, requirements, response, sheetDocument } from '../builders'

/** Job 2655, an invented light railway's public address. */

export const outputFilter = sheetDocument('A-301', [
  heading('1 Purpose'),
  paragraph('The platform amplifiers switch at 384 kHz. An inductor and a capacitor at each output take the carrier off before the loudspeaker line. The line is the only damping the filter has: a platform with few loudspeakers leaves it nearly undamped, a full one damps it well. The filter is therefore computed at light, rated and heavy load.'),
  heading('2 Inputs'),
  calculation([
    given('f_sw = 384 kHz', 'Amplifier, maker\'s data sheet'),
    given('R_light = 16 ohm', 'TVR-PA-01 rev. 5: two loudspeakers'),
    given('R_rated = 8 ohm', 'TVR-PA-01 rev. 5: four loudspeakers'),
    given('R_heavy = 4 ohm', 'TVR-PA-01 rev. 5: eight loudspeakers'),
    line('L = 22 uH ± 10 %', 'At 6 A, maker\'s data'),
    line('C = 680 nF ± 5 %', 'Film, E6'),
  ]),
  heading('3 Natural frequency and damping'),
  calculation([
    line('f_0 = 1/(2*pi*sqrt(L*C)) to kHz'),
    line('Z_0 = sqrt(L/C) to ohm'),
    line('zeta_light = Z_0/(2*R_light)'),
    line('zeta_rated = Z_0/(2*R_rated)'),
    line('zeta_heavy = Z_0/(2*R_heavy)'),
  ]),
  paragraph('A damping ratio of $1/sqrt(2)$ gives the flattest pass band; the rated load lies below it and the heavy one just at it.'),
  heading('4 Responses'),
  calculation([
    line('H_light(s) = 1/(1 + s*L/R_light + s^2*L*C)'),
    line('H_rated(s) = 1/(1 + s*L/R_rated + s^2*L*C)'),
    line('H_heavy(s) = 1/(1 + s*L/R_heavy + s^2*L*C)'),
  ]),
  response({ transfer: 'H_light', from: '1 kHz', to: '1 MHz', caption: 'Light load, two loudspeakers.' }),
  response({ transfer: 'H_rated', from: '1 kHz', to: '1 MHz', showAsymptotes: true, caption: 'Rated load, four loudspeakers.' }),
  response({ transfer: 'H_heavy', from: '1 kHz', to: '1 MHz', caption: 'Heavy load, eight loudspeakers.' }),
  heading('5 Requirements'),
  requirements([
    line('attenuation(H_light, f_sw) >= 36 dB # carrier, light load', 'TVR-PA-01 rev. 5, cl. 7.2'),
    line('attenuation(H_heavy, f_sw) >= 36 dB # carrier, heavy load', 'TVR-PA-01 rev. 5, cl. 7.2'),
    line('gain(H_light, 20 kHz) <= 3 dB # rise at the edge of the band, light load', 'TVR-PA-01 rev. 5, cl. 7.3'),
    line('gain(H_heavy, 20 kHz) >= -3 dB # fall at the edge of the band, heavy load', 'TVR-PA-01 rev. 5, cl. 7.3'),
    line('resonancePeak(H_light) <= 10 dB # peak above the band, light load', 'TVR-PA-01 rev. 5, cl. 7.4'),
  ]),
  heading('6 Conclusion'),
  paragraph('The load sets the damping. At light load the filter peaks by about 9 dB near 40 kHz, outside the band and within the limit; no platform may be run without loudspeakers, which is stated on the amplifier\'s drawing.'),
])

export const lineHighPass = sheetDocument('A-302', [
  heading('1 Purpose'),
  paragraph('A capacitor in each loudspeaker line keeps low notes from saturating the line transformers.'),
  heading('2 Inputs'),
  calculation([
    given('R_l = 8 ohm ± 15 %', 'Loudspeaker, maker\'s range'),
    line('C_l = 68 uF ± 10 %', 'Bipolar'),
    given('f_lo = 300 Hz', 'TVR-PA-01 rev. 5, cl. 4.1'),
  ]),
  heading('3 Filter'),
  calculation([
    line('H(s) = s*R_l*C_l/(1 + s*R_l*C_l)'),
    line('f_c = cutoffFrequency(H) to Hz'),
  ]),
  response({ transfer: 'H', from: '10 Hz', to: '10 kHz', showAsymptotes: true }),
  heading('4 Requirements'),
  requirements([
    line('attenuation(H, 50 Hz) >= 13 dB # below the band', 'TVR-PA-01 rev. 5, cl. 4.3'),
    line('gain(H, f_lo) >= -4.5 dB # at the lowest frequency of speech', 'TVR-PA-01 rev. 5, cl. 4.2'),
  ]),
  heading('5 Conclusion'),
  paragraph('68 µF meets both at worst case.'),
])

export const supplyFilter = sheetDocument('A-303', [
  heading('1 Purpose'),
  paragraph('The preamplifiers are fed from the amplifier\'s 48 V through a third-order ladder, so that the ripple of the converter stays out of the microphone channels.'),
  heading('2 Inputs'),
  calculation([
    given('f_r = 100 kHz', 'Converter, maker\'s data'),
    given('R_load = 120 ohm', 'Preamplifiers, 0.4 A at 48 V'),
    line('R_1 = 10 ohm ± 5 %', 'Series resistor, damps the ladder'),
    line('C_1 = 10 uF ± 20 %'),
    line('L_2 = 47 uH ± 20 %'),
    line('C_3 = 22 uF ± 20 %'),
  ]),
  heading('3 Ladder'),
  calculation([
    line('Y_3(s) = s*C_3 + 1/R_load'),
    line('Z_23(s) = s*L_2 + 1/Y_3(s)'),
    line('Y_1(s) = s*C_1 + 1/Z_23(s)'),
    line('H(s) = 1/(1 + R_1*Y_1(s))*1/(1 + s*L_2*Y_3(s))'),
    line('V_drop = 48 V*R_1/(R_1 + R_load)', 'Lost in the series resistor'),
  ]),
  response({ transfer: 'H', from: '100 Hz', to: '1 MHz', showAsymptotes: true }),
  heading('4 Requirements'),
  requirements([
    line('attenuation(H, f_r) >= 80 dB # ripple of the converter', 'TVR-PA-03 rev. 1, cl. 5.5'),
    line('V_drop <= 5 V # drop at full load', 'Preamplifier, lowest supply 42 V'),
  ]),
])

export const dampedLine = sheetDocument('A-304', [
  heading('1 Purpose'),
  paragraph('An RC leg across the loudspeaker line of the concourse, against the inductance of the long line.'),
  heading('2 Inputs'),
  calculation([
    assumed('L_line = 90 uH ± 20 %', '140 m, common practice, no source'),
    given('R_line = 3.3 ohm', 'Drg. TVR-E-118'),
    line('R_leg = 10 ohm ± 5 %'),
    line('C_leg = 1 uF ± 10 %'),
  ]),
  heading('3 Response at the end of the line'),
  calculation([
    line('Z_leg(s) = R_leg + 1/(s*C_leg)'),
    line('H(s) = Z_leg(s)/(R_line + s*L_line + Z_leg(s))'),
    line('zeta = dampingRatio(H)'),
  ]),
  response({ transfer: 'H', from: '100 Hz', to: '1 MHz' }),
  heading('4 Requirements'),
  requirements([
    line('resonancePeak(H) <= 4 dB # peak at the end of the line', 'TVR-PA-01 rev. 5, cl. 7.4'),
  ]),
])
