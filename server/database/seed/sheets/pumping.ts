import { assumed, calculation, given, heading, line, paragraph, requirements, response, sheetDocument } from '../builders'

/** Job 2641, an invented pumping station with vibration monitoring. */

export const antiAlias = sheetDocument('V-201', [
  heading('1 Purpose'),
  paragraph('Each accelerometer channel is converted by a sigma-delta converter whose modulator runs at 1.6384 MHz. The converter\'s own digital filter looks after everything up to that frequency; what lies around it folds back into the band and can only be taken off ahead of the converter. One RC section does it, provided that it costs nothing inside the band of 1 kHz.'),
  heading('2 Inputs'),
  calculation([
    given('f_m = 1.6384 MHz', 'Converter data sheet, rev. D, table 7'),
    given('f_b = 1 kHz', 'CW-INS-02 rev. 1, cl. 3.4'),
    assumed('R_s = 50 ohm ± 20 %', 'Output of the charge amplifier, typical curve'),
    line('R_1 = 1 kohm ± 1 %', 'Metal film, 50 ppm/K'),
    line('C_1 = 12 nF ± 5 %', 'C0G, no bias dependence'),
  ]),
  heading('3 Filter'),
  calculation([
    line('R = R_s + R_1'),
    line('tau = R*C_1 to us'),
    line('H(s) = 1/(1 + s*R*C_1)'),
    line('f_c = cornerFrequency(H) to kHz'),
    line('a_b = attenuation(H, f_b)', 'Droop at the edge of the band'),
    line('a_m = attenuation(H, f_m)', 'Around the modulator\'s frequency'),
    line('phi_b = phase(H, f_b) to deg'),
  ]),
  response({ transfer: 'H', from: '100 Hz', to: '10 MHz', showAsymptotes: true, caption: 'From the charge amplifier to the converter.' }),
  heading('4 Requirements'),
  requirements([
    line('attenuation(H, f_m) >= 40 dB # images around the modulator\'s frequency', 'Converter data sheet, rev. D, p. 31'),
    line('attenuation(H, f_b) <= 0.1 dB # droop in the band', 'CW-INS-02 rev. 1, cl. 3.5'),
    line('settlingTime(H, 0.1 %) <= 100 us # recovery after a shock', 'CW-INS-02 rev. 1, cl. 3.7'),
  ]),
  heading('5 Conclusion'),
  paragraph('One section with 1 kΩ and 12 nF meets all three at worst case, with the source\'s resistance included.'),
])

export const twoSections = sheetDocument('V-202', [
  heading('1 Purpose'),
  paragraph('The temperature transmitters share a cable tray with the drives. Two RC sections in cascade take the hum and the carrier off each channel; the second loads the first, so the two cannot be multiplied.'),
  heading('2 Inputs'),
  calculation([
    given('f_n = 50 Hz', 'Supply'),
    given('f_pwm = 4 kHz', 'Drive list CW-EL-09'),
    line('R_1 = 10 kohm ± 1 %'),
    line('R_2 = 47 kohm ± 1 %', 'Higher, so as to load the first less'),
    line('C_1 = 1 uF ± 10 %'),
    line('C_2 = 220 nF ± 10 %'),
  ]),
  heading('3 Transfer function'),
  paragraph('By nodal analysis of the two meshes:'),
  calculation([
    line('b_1 = R_1*C_1 + R_2*C_2 + R_1*C_2 to ms'),
    line('b_2 = R_1*R_2*C_1*C_2 to ms^2'),
    line('H(s) = 1/(1 + s*b_1 + s^2*b_2)'),
    line('f_c = cutoffFrequency(H) to Hz', 'Half power'),
    line('zeta = dampingRatio(H)', 'Two real poles'),
    line('p = poles(H)'),
  ]),
  response({ transfer: 'H', from: '0.1 Hz', to: '10 kHz', showAsymptotes: true, showStep: true }),
  heading('4 Requirements'),
  requirements([
    line('attenuation(H, f_n) >= 18 dB # hum', 'CW-INS-05 rev. 2, cl. 4.1'),
    line('attenuation(H, f_pwm) >= 80 dB # carrier of the drives', 'CW-INS-05 rev. 2, cl. 4.2'),
    line('settlingTime(H, 2 %) <= 150 ms # response to a step of temperature', 'CW-INS-05 rev. 2, cl. 4.4'),
  ]),
  heading('5 Conclusion'),
  paragraph('Hum and carrier are held back as asked at worst case and the channel settles in time.'),
])

export const currentLoop = sheetDocument('V-203', [
  heading('1 Purpose'),
  paragraph('The level transmitters send 4 to 20 mA over 600 m of cable. The burden and a capacitor at the input make the low-pass; the cable\'s own capacitance adds to it.'),
  heading('2 Inputs'),
  calculation([
    given('R_b = 250 ohm ± 0.1 %', 'Burden, CW-INS-03'),
    given('l = 600 m', 'Cable list CW-EL-12'),
    assumed('C_m = 110 pF/m ± 15 %', 'Screened pair, maker\'s range'),
    line('C_i = 1 uF ± 10 %'),
  ]),
  heading('3 Filter'),
  calculation([
    line('C_c = C_m*l to nF'),
    line('C = C_i + C_c'),
    line('Z(s) = R_b/(1 + s*R_b*C)', 'Input current to measured voltage'),
    line('f_c = cornerFrequency(Z) to Hz'),
    line('V_fs = R_b*(20 mA) to V', 'At full scale'),
  ]),
  response({ transfer: 'Z', from: '10 Hz', to: '100 kHz', caption: 'Transfer impedance, level over 1 Ω.' }),
  heading('4 Requirements'),
  requirements([
    line('attenuation(Z, 10 kHz) >= 20 dB # drives', 'CW-INS-03 rev. 1, cl. 2.6'),
    line('4.9 V <= V_fs <= 5.1 V # full scale inside the converter\'s range', 'Converter data sheet'),
  ]),
])

export const driftFilter = sheetDocument('V-204', [
  heading('1 Purpose'),
  paragraph('The charge amplifier drifts with temperature. A high-pass ahead of the converter takes the drift off without touching the lowest running speed of the pumps, 8 Hz.'),
  heading('2 Inputs'),
  calculation([
    given('f_run = 8 Hz', 'Pump data, lowest speed 480 1/min'),
    line('C = 10 uF ± 10 %', 'Film'),
    line('R = 33 kohm ± 1 %'),
  ]),
  heading('3 Filter'),
  calculation([
    line('H(s) = s*R*C/(1 + s*R*C)'),
    line('f_c = cutoffFrequency(H) to Hz'),
    line('phi = phase(H, f_run) to deg', 'Lead at running speed'),
  ]),
  response({ transfer: 'H', from: '0.01 Hz', to: '1 kHz', showAsymptotes: true }),
  heading('4 Requirements'),
  requirements([
    line('attenuation(H, f_run) <= 0.05 dB # level at running speed', 'CW-INS-02 rev. 1, cl. 3.8'),
    line('lowSlope(H) >= 20 dB/decade # drift', 'CW-INS-02 rev. 1, cl. 3.9'),
    line('phase(H, f_run) <= 5 deg # lead at running speed', 'CW-INS-02 rev. 1, cl. 3.10'),
  ]),
])
