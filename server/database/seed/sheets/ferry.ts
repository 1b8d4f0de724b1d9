import { assumed, bullets, calculation, given, heading, hold, line, paragraph, requirements, response, sheetDocument, table } from '../builders'

/** Job 2638, an invented ferry terminal with shore charging. */

/**
 * Supply input filter with its damping leg. Optimum of the leg: R. W. Erickson, "Optimal single resistors damping of
 * input filters", IEEE APEC 1999. The limit on the output impedance is the usual half of the converter's input resistance
 * (R. D. Middlebrook, "Input filter considerations in design and application of switching regulators", IEEE IAS 1976).
 */
const inputFilterWith = (resistor: string) => sheetDocument('F-101', [
  heading('1 Purpose and basis'),
  paragraph('The auxiliary converter of each charging bay draws its ripple from the 24 V battery bus at its switching frequency of 150 kHz. The filter ahead of it must hold that ripple back, and must not itself upset the converter: seen from the bus the converter is a constant load of power, whose input resistance is negative, so the output impedance of the filter has to stay well below it at every frequency.'),
  paragraph('A leg of a resistor and a large capacitor, $R_d$ and $C_d$, stands across $C_1$ and damps the filter without carrying the ripple.'),
  heading('2 Inputs'),
  calculation([
    given('V_n = 24 V', 'NF-EL-04 rev. 3, cl. 5.1'),
    given('V_min = 18 V', 'NF-EL-04 rev. 3, cl. 5.1'),
    given('P_out = 60 W', 'Bay load list NF-EL-11 rev. 2'),
    assumed('eta = 0.9', 'Lowest over the load range, similar converters measured by us'),
    given('f_sw = 150 kHz', 'Maker\'s data sheet, table 4'),
    given('L_1 = 4.7 uH ± 20 %', 'Maker\'s data, at 85 °C and 8 A'),
    given('C_1 = 10 uF ± 10 %', 'Film, maker\'s data'),
    given('C_d = 47 uF ± 20 %', 'Maker\'s data, end of life'),
    line(`R_d = ${resistor} ohm ± 5 %`, 'E24, near the optimum below'),
  ]),
  heading('3 Corner and damping leg'),
  calculation([
    line('f_0 = 1/(2*pi*sqrt(L_1*C_1)) to kHz'),
    line('Z_0 = sqrt(L_1/C_1) to ohm'),
    line('n = nominal(C_d)/nominal(C_1)', 'Ratio of the leg\'s capacitor to C1'),
    line('R_opt = nominal(Z_0)*sqrt((2 + n)*(4 + 3*n)/(2*n^2*(4 + n))) to ohm', 'Erickson 1999, optimum of the leg'),
    line('Z_pk = nominal(Z_0)*sqrt(2*(2 + n))/n to ohm', 'Erickson 1999, peak at the optimum'),
  ]),
  paragraph('The leg takes a value of the E24 series near the optimum.'),
  heading('4 Transfer of the filter'),
  calculation([
    line('Z_1(s) = s*L_1'),
    line('Z_2(s) = 1/(s*C_1 + 1/(R_d + 1/(s*C_d)))'),
    line('H(s) = Z_2(s)/(Z_1(s) + Z_2(s))'),
    line('f_pk = resonanceFrequency(H) to kHz'),
    line('a_sw = attenuation(H, f_sw)'),
  ]),
  response({ transfer: 'H', from: '1 kHz', to: '1 MHz', showAsymptotes: true, caption: 'From the bus to the converter; the same curve takes the converter\'s ripple current to the bus.' }),
  heading('5 Output impedance against the converter'),
  calculation([
    line('P_in = P_out/eta to W'),
    line('R_in = V_min^2/P_in to ohm', 'Negative slope of a constant power at the lowest voltage'),
    line('Z_o(s) = 1/(1/(s*L_1) + s*C_1 + 1/(R_d + 1/(s*C_d)))'),
    line('Z_max = max(magnitude(Z_o, [8 kHz, 11 kHz, 14 kHz, 17 kHz, 20 kHz, 24 kHz, 30 kHz, 40 kHz])) to ohm'),
    line('margin_Z = level(R_in/Z_max)'),
  ]),
  response({ transfer: 'Z_o', from: '1 kHz', to: '1 MHz', showPhase: false, caption: 'Output impedance of the filter, level over 1 Ω.' }),
  heading('6 Requirements'),
  requirements([
    line('attenuation(H, f_sw) >= 28 dB # ripple held back at the switching frequency', 'NF-EL-04 rev. 3, cl. 6.2'),
    line('resonancePeak(H) <= 6 dB # peak of the filter', 'NF-EL-04 rev. 3, cl. 6.3'),
    line('Z_max <= R_in/2 # output impedance below half the converter\'s input resistance', 'Middlebrook 1976'),
    line('margin_Z >= 12 dB # margin of impedance at the lowest supply', 'Firm\'s practice, design note 14'),
  ]),
  heading('7 Conclusion'),
  paragraph('The filter with the leg $R_d$ and $C_d$ meets the four requirements at worst case. The leg must not be left out as an economy: without it the filter\'s impedance at resonance is bounded only by the losses of the inductor.'),
])

/** The first issue, with a leg above the optimum, and the one that superseded it. */
export const inputFilterFirst = inputFilterWith('0.47')
export const inputFilter = inputFilterWith('0.39')

/** A capacitor switched onto a cable: what the control supply sees. Carries a caution. */
export const switchOn = sheetDocument('F-102', [
  heading('1 Purpose'),
  paragraph('The controller of the pilot relay is fed from the 48 V station supply by a cable of 15 m. When its breaker is closed the cable\'s inductance and the controller\'s input capacitor ring. The voltage at the controller has to stay below the rating of its input capacitor.'),
  heading('2 Inputs'),
  calculation([
    given('V_s = 54 V', 'Float voltage, NF-EL-07 rev. 1'),
    given('V_r = 100 V', 'Rated voltage of the input capacitor, maker\'s data'),
    assumed('l = 15 m', 'Route drawing E-310, longest run'),
    assumed('L_m = 0.65 uH/m', 'Two cores side by side, common practice, no source'),
    given('r_m = 7.98 mohm/m', 'IEC 60228, class 5, 2.5 mm², at 20 °C, from memory'),
    given('C = 47 uF ± 20 %', 'Maker\'s data'),
    hold('R_esr = 30 mohm', 'Awaited: Brandt Controls, series resistance at -10 °C'),
  ]),
  heading('3 Damping'),
  calculation([
    line('L = L_m*l to uH', 'Out and back counted as one loop'),
    line('R_c = 2*r_m*l to ohm', 'Out and back'),
    line('R = R_c + R_esr'),
    line('f_0 = 1/(2*pi*sqrt(L*C)) to kHz'),
    line('zeta = R/2*sqrt(C/L)'),
    line('H(s) = (1 + s*R_esr*C)/(1 + s*R*C + s^2*L*C)'),
    line('d = overshoot(H)'),
    line('V_pk = V_s*(1 + d) to V', 'Peak at the controller'),
  ]),
  response({ transfer: 'H', from: '100 Hz', to: '100 kHz', showStep: true, supply: 'V_s', rating: 'V_r', caption: 'From the breaker to the controller\'s input.' }),
  heading('4 Requirements'),
  requirements([
    line('V_pk <= 0.8*V_r # peak at switch-on against the derated capacitor', 'Firm\'s practice: 80 % of the rating'),
    line('settlingTime(H, 5 %) <= 2 ms # ringing over before the controller starts', 'Brandt Controls, start-up time'),
  ]),
  heading('5 Conclusion'),
  paragraph('The ringing of the cable lifts the controller well above its supply for a moment, and stays below four fifths of the capacitor\'s rating at worst case. The capacitor\'s series resistance in the cold is awaited; a higher one damps more.'),
])

/** Stored energy and discharge of the intermediate circuit. */
export const discharge = sheetDocument('F-103', [
  heading('1 Purpose'),
  paragraph('After the charger is switched off its intermediate circuit stays charged. The sheet gives the energy kept in it and the time in which the bleeder brings it to a voltage that may be touched.'),
  heading('2 Inputs'),
  calculation([
    given('V_dc = 750 V', 'NF-EL-02 rev. 4'),
    given('C_dc = 1.2 mF ± 10 %', 'Maker\'s data'),
    given('V_safe = 60 V', 'IEC 61800-5-1, residual voltage of 60 V, from memory'),
    line('R_b = 22 kohm ± 5 %', 'Two in series of 11 kΩ'),
  ]),
  heading('3 Energy and time'),
  calculation([
    line('E = 1/2*C_dc*V_dc^2 to J'),
    line('tau = R_b*C_dc to s'),
    line('t_safe = tau*log(V_dc/V_safe) to s', 'Exponential decay'),
    line('P_b = V_dc^2/R_b to W', 'Continuous dissipation of the bleeder'),
  ]),
  heading('4 Requirements'),
  requirements([
    line('t_safe <= 90 s # time to 60 V without the active discharge', 'NF-EL-02 rev. 4, cl. 9.4'),
    line('P_b <= 0.5*60 W # bleeder at half its rating', 'Firm\'s practice, derating note 3'),
  ]),
  heading('5 Conclusion'),
  paragraph('The label at the cover states 5 minutes. Work on the charger follows the local electrical safety rules: absence of voltage is proved by measurement, never by waiting.'),
])

/** Low-pass on the control pilot line. */
export const pilotLine = sheetDocument('F-104', [
  heading('1 Purpose'),
  paragraph('The pilot signal of 1 kHz is measured by the controller through a low-pass that takes off the inverter\'s residue around 16 kHz. Its edges must stay steep enough for the duty cycle to be read.'),
  heading('2 Inputs'),
  calculation([
    given('f_p = 1 kHz', 'IEC 61851-1, control pilot, from memory'),
    given('f_inv = 16 kHz', 'Inverter, maker\'s data'),
    line('R = 1 kohm ± 1 %'),
    line('C = 4.7 nF ± 5 %'),
  ]),
  heading('3 Filter'),
  calculation([
    line('H(s) = 1/(1 + s*R*C)'),
    line('f_c = cornerFrequency(H) to kHz'),
    line('t_r = riseTime(H) to us'),
  ]),
  response({ transfer: 'H', from: '100 Hz', to: '1 MHz', showStep: true }),
  heading('4 Requirements'),
  requirements([
    line('t_r <= 15 us # edges of the pilot', 'Controller, measurement window'),
    line('attenuation(H, f_inv) >= 6 dB # residue of the inverter', 'Controller, measurement error budget'),
  ]),
  paragraph('The second requirement is not met: one section cannot do both. A second section, or a slower edge agreed with the maker of the controller, is to be decided.'),
  bullets(['Two sections in cascade: see sheet V-202 for the method.', 'Edge of 30 µs: asked of the maker on 24 November 2026.']),
  table([['Option', 'Attenuation at 16 kHz', 'Rise time'], ['One section, as above', '0.9 dB', '10 µs'], ['Two sections', 'to be computed', 'to be computed']]),
])
