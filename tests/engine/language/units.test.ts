/** Units against GNU units 2.22, figures computed by running that program (data/units.json). */
import { describe, expect, it } from 'vitest'
import data from '../data/units.json'
import { valueIn } from './support'

/** How each of its conversions is written here; what is left out has no unit here (wire gauges, turns). */
const WRITTEN: Record<string, [source: string, unit: string]> = {
  '1 uH -> H': ['1 uH', 'H'],
  '4.7 uH -> nH': ['4.7 uH', 'nH'],
  '330 nH -> uH': ['330 nH', 'uH'],
  '10 mH -> H': ['10 mH', 'H'],
  '1 H -> mH': ['1 H', 'mH'],
  '100 nF -> F': ['100 nF', 'F'],
  '2200 pF -> nF': ['2200 pF', 'nF'],
  '0.01 uF -> nF': ['0.01 uF', 'nF'],
  '47 uF -> mF': ['47 uF', 'mF'],
  '10 pF -> fF': ['10 pF', 'fF'],
  '4.7 kohm -> ohm': ['4.7 kΩ', 'ohm'],
  '2.2 Mohm -> kohm': ['2.2 Mohm', 'kohm'],
  '15 mohm -> ohm': ['15 mohm', 'ohm'],
  '1 Gohm -> Mohm': ['1 Gohm', 'Mohm'],
  '2 mS -> ohm^-1': ['2 mS', 'ohm^-1'],
  '1 S (mho) -> mho': ['1 S', 'mho'],
  '1/(4.7 kohm) -> uS': ['1/(4.7 kohm)', 'uS'],
  '1 MHz -> kHz': ['1 MHz', 'kHz'],
  '2.4 GHz -> MHz': ['2.4 GHz', 'MHz'],
  '1 kHz period -> us': ['1/(1 kHz)', 'us'],
  '31622.7766 rad/s -> turns per second': ['31622.7766 rad/s to Hz', 'Hz'],
  '1 turn/s -> rad/s': ['1 Hz', 'rad/s'],
  '60 rpm -> rad/s': ['60 rpm', 'rad/s'],
  '180 deg -> rad': ['180 deg', 'rad'],
  '1 rad -> deg': ['1 rad', 'deg'],
  '90 arcmin -> deg': ['90 arcmin', 'deg'],
  '1 mil -> mm': ['1 mil', 'mm'],
  '35 um -> mil': ['35 um', 'mil'],
  '0.1 inch -> mm': ['0.1 inch', 'mm'],
  '1 oz/ft^2 copper thickness -> um': ['1 oz/foot^2/(8.96 g/cm^3)', 'um'],
  '1 ohm*F -> s': ['1 ohm*F', 's'],
  '10 kohm * 100 nF -> ms': ['10 kohm*100 nF', 'ms'],
  '10 mH / 50 ohm -> us': ['10 mH/(50 ohm)', 'us'],
  'sqrt(10 mH * 100 nF) -> us': ['sqrt(10 mH*100 nF)', 'us'],
  '1/sqrt(10 mH * 100 nF) -> 1/s': ['1/sqrt(10 mH*100 nF)', '1/s'],
  'sqrt(10 mH/100 nF) -> ohm': ['sqrt((10 mH)/(100 nF))', 'ohm'],
  '0.5*47uF*(400 V)^2 -> J': ['0.5*47 uF*(400 V)^2', 'J'],
  '47 uF * 400 V -> mC': ['47 uF*400 V', 'mC'],
  '1 A*h -> C': ['1 A*h', 'C'],
  '1 kW*h -> MJ': ['1 kW*h', 'MJ'],
  '1 eV -> J': ['1 eV', 'J'],
  '1 V/A -> ohm': ['1 V/A', 'ohm'],
  '1 Wb/A -> H': ['1 Wb/A', 'H'],
  '1 V*s -> Wb': ['1 V*s', 'Wb'],
  '1 T -> gauss': ['1 T', 'gauss'],
  '1 C/V -> F': ['1 C/V', 'F'],
  '10 dBm -> mW': ['10 dBm to mW', 'mW'],
  '0 dBm -> W': ['0 dBm to W', 'W'],
  '-30 dBm -> uW': ['-30 dBm to uW', 'uW'],
  '1 W -> dBm': ['1 W to dBm', 'dBm'],
  '0 dBV -> V': ['0 dBV to V', 'V'],
  '6 dBV -> V': ['6 dBV to V', 'V'],
  '60 dBuV -> mV': ['60 dBuV to mV', 'mV'],
  '-3 dB power ratio -> 1': ['powerRatio(-3 dB)', ''],
  '-3 dB amplitude ratio -> 1': ['ratio(-3 dB)', ''],
  'power ratio 0.5 -> dB': ['powerLevel(0.5)', 'dB'],
  'amplitude ratio 1/sqrt(2) -> dB': ['level(1/sqrt(2))', 'dB'],
  '1 Np -> amplitude ratio': ['ratio(1 Np)', ''],
  '50 ohm 13 dBm -> V rms -> V': ['sqrt(powerRatio(13 dB)*1 mW*50 ohm)', 'V'],
  '20 degC -> K': ['20 degC to K', 'K'],
  '1 ppm -> percent': ['1 ppm', 'percent'],
  '100 ppm/K * 50 K -> percent': ['100 ppm/K*50 K', '%'],
}

describe('units', () => {
  const known = data.records.filter(record => record.quantity in WRITTEN)

  it('are nearly all of the trade that the list holds', () => {
    expect(data.records.length - known.length).toBeLessThanOrEqual(4)
    expect(known).toHaveLength(Object.keys(WRITTEN).length)
  })

  it.each(known)('$quantity is $value ($source, $provenance)', ({ quantity, value }) => {
    const [source, unit] = WRITTEN[quantity] ?? ['', '']
    const found = valueIn(unit, source)
    expect(Math.abs(found / Number(value) - 1)).toBeLessThan(1e-12)
  })

  it.each(['L', 'B', 'l', 't', 'R', 'b'])('%s is no unit', (word) => {
    expect(() => valueIn('', `5 ${word}`)).toThrow(/not defined/)
  })
})
