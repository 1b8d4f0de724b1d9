"""Makes the cases of this folder and the golden file of random circuits, both outside the project's own solver.

Cases: modified nodal equations solved with mpmath at 50 digits; poles are the roots of det(G + sC), interpolated
at 400 digits. Golden file: the AC analysis of ngspice on a hundred random circuits (fixed seed).

    python3 tests/circuits/make.py
"""
import json, os, random, subprocess, tempfile
import mpmath as mp

HERE = os.path.dirname(os.path.abspath(__file__))
GOLDEN = os.path.join(HERE, '..', 'engine', 'circuit', 'random-circuits.json')


def equations(elements, source):
    nodes, branches = {}, {}
    for e in elements:
        for n in list(e.get('nodes', [])) + list(e.get('ctrl_nodes', [])):
            if n != '0':
                nodes.setdefault(n, len(nodes))
    size = len(nodes)
    for e in elements:
        if e['kind'] in ('L', 'V', 'vcvs', 'ccvs', 'opamp', 'transformer', 'C', 'R', 'vccs', 'cccs'):
            branches[e['ref']] = size
            size += 1
    G, C, b = mp.zeros(size), mp.zeros(size), mp.zeros(size, 1)

    def put(M, i, j, x):
        if i is not None and j is not None:
            M[i, j] += mp.mpf(x)

    at = lambda n: None if n == '0' else nodes[n]
    by = {e['ref']: e for e in elements}
    for e in elements:
        k, v = e['kind'], e.get('value')
        if k == 'coupling':
            a, c = e['couples']
            M = mp.mpf(v) * mp.sqrt(mp.mpf(by[a]['value']) * mp.mpf(by[c]['value']))
            C[branches[a], branches[c]] -= M
            C[branches[c], branches[a]] -= M
            continue
        if k == 'I':
            if e['ref'] == source:
                if at(e['nodes'][0]) is not None: b[at(e['nodes'][0])] -= 1
                if at(e['nodes'][1]) is not None: b[at(e['nodes'][1])] += 1
            continue
        i = branches[e['ref']]
        if k == 'opamp':
            plus, minus, out = map(at, e['nodes'])
            put(G, out, i, 1)
            put(G, i, plus, 1); put(G, i, minus, -1)
            if 'bandwidth_Hz' in e:
                put(C, i, out, -1 / (2 * mp.pi * mp.mpf(e['bandwidth_Hz'])))
            if 'gain' in e:
                put(G, i, out, -1 / mp.mpf(e['gain']))
            continue
        if k == 'transformer':
            p, n, q, m = map(at, e['nodes'])
            put(G, p, i, 1); put(G, n, i, -1); put(G, q, i, -mp.mpf(v)); put(G, m, i, mp.mpf(v))
            put(G, i, p, 1); put(G, i, n, -1); put(G, i, q, -mp.mpf(v)); put(G, i, m, mp.mpf(v))
            continue
        p, n = map(at, e['nodes'])
        put(G, p, i, 1); put(G, n, i, -1)
        if k in ('R', 'L', 'V', 'vcvs', 'ccvs'):
            put(G, i, p, 1); put(G, i, n, -1)
        if k == 'R': put(G, i, i, -mp.mpf(v))
        if k == 'L': put(C, i, i, -mp.mpf(v)); put(G, i, i, -mp.mpf(e.get('series_R', 0)))
        if k == 'C': put(C, i, p, v); put(C, i, n, -mp.mpf(v)); put(G, i, i, -1)
        if k == 'V' and e['ref'] == source: b[i] += 1
        if k in ('vcvs', 'vccs'):
            put(G, i, at(e['ctrl_nodes'][0]), -mp.mpf(v)); put(G, i, at(e['ctrl_nodes'][1]), mp.mpf(v))
        if k in ('vccs', 'cccs'): put(G, i, i, 1)
        if k in ('ccvs', 'cccs'): put(G, i, branches[e['ctrl_ref']], -mp.mpf(v))
    return G, C, b, at, branches


def flat(elements):
    """Capacitors with something in series, written out."""
    out = []
    for e in elements:
        if e['kind'] == 'C' and ('series_R' in e or 'series_L' in e):
            r, l, (p, n) = e.get('series_R', 0), e.get('series_L', 0), e['nodes']
            x, y = e['ref'] + '#1', e['ref'] + '#2'
            if r and l:
                out += [dict(ref=e['ref'], kind='R', nodes=[p, x], value=r), dict(ref=e['ref'] + '#L', kind='L', nodes=[x, y], value=l)]
            else:
                out += [dict(ref=e['ref'], kind='R' if r else 'L', nodes=[p, y], value=r or l)]
            out += [dict(ref=e['ref'] + '#C', kind='C', nodes=[y, n], value=e['value'])]
        else:
            out.append(e)
    return out


def response(elements, source, output, freqs):
    mp.mp.dps = 50
    G, C, b, at, branches = equations(flat(elements), source)
    H = []
    for f in freqs:
        x = mp.lu_solve(G + 2j * mp.pi * mp.mpf(f) * C, b)
        if output['type'] == 'voltage':
            v = [mp.mpf(0) if at(n) is None else x[at(n)] for n in output['nodes']]
            H.append(v[0] - v[1])
        else:
            H.append(x[branches[output['element']]])
    return H


def poles(elements, rate):
    mp.mp.dps = 400
    G, C, b, at, branches = equations(flat(elements), None)
    n = G.rows
    count = n + 1
    w = [mp.expjpi(mp.mpf(2 * k) / count) for k in range(count)]
    values = [mp.det(G + rate * z * C) for z in w]
    coefficients = [mp.re(sum(v * z ** -k for v, z in zip(values, w)) / count) for k in range(count)]
    top = max(abs(c) for c in coefficients)
    coefficients = [c if abs(c) > top * mp.mpf(10) ** -300 else mp.mpf(0) for c in coefficients]
    while coefficients and coefficients[-1] == 0: coefficients.pop()
    zeros = 0
    while coefficients and coefficients[0] == 0:
        coefficients.pop(0); zeros += 1
    roots = mp.polyroots(coefficients[::-1], maxsteps=4000, extraprec=1500, error=False) if len(coefficients) > 1 else []
    clean = lambda x, z: mp.mpf(0) if abs(x) < abs(z) * mp.mpf(10) ** -60 else x
    return [[0.0, 0.0]] * zeros + [[float(clean(mp.re(z), z) * rate), float(clean(mp.im(z), z) * rate)] for z in roots]


def grid(lo, hi, n=25):
    return [float('%.9g' % (lo * (hi / lo) ** (k / (n - 1)))) for k in range(n)]


def R(ref, a, b, v): return dict(ref=ref, kind='R', nodes=[a, b], value=v)
def L(ref, a, b, v, **k): return dict(ref=ref, kind='L', nodes=[a, b], value=v, **k)
def Cap(ref, a, b, v, **k): return dict(ref=ref, kind='C', nodes=[a, b], value=v, **k)
def V(ref, a, b, v=1): return dict(ref=ref, kind='V', nodes=[a, b], value=v)
def I(ref, a, b, v=1): return dict(ref=ref, kind='I', nodes=[a, b], value=v)
def out(a, b='0'): return dict(type='voltage', nodes=[a, b])
def cur(e): return dict(type='current', element=e)


def ladder(n):
    es, node = [V('V1', 'in', '0'), R('RS', 'in', 'n0', 50.0)], 'n0'
    for k in range(n):
        es += [L('L%d' % k, node, 'n%d' % (k + 1), 1e-6 * (1 + 0.1 * k)), Cap('C%d' % k, 'n%d' % (k + 1), '0', 4e-10 * (1 + 0.07 * (k % 4)))]
        node = 'n%d' % (k + 1)
    return es + [R('RL', node, '0', 50.0)], node


def cases():
    es, last = ladder(10)
    yield 'ladder-of-twenty', 'LC ladder of ten sections between 50 ohm', es, 'V1', out(last), grid(1e4, 2e7), 1e7
    yield 'twin-t', 'twin-T notch with unequal parts', [V('V1', 'in', '0'), R('R1', 'in', 'a', 1e4), R('R2', 'a', 'o', 1.02e4), Cap('C3', 'a', '0', 2e-8), Cap('C1', 'in', 'b', 1e-8), Cap('C2', 'b', 'o', 1.01e-8), R('R3', 'b', '0', 4.9e3), R('RL', 'o', '0', 1e6)], 'V1', out('o'), grid(10, 1e5), 1e4
    yield 'spread-rates', 'time constants from hours to nanoseconds', [V('V1', 'in', '0'), R('R1', 'in', 'a', 1e6), Cap('C1', 'a', '0', 4.7e-3), R('R2', 'a', 'b', 1e3), Cap('C2', 'b', '0', 1e-6), R('R3', 'b', 'o', 10.0), Cap('C3', 'o', '0', 1e-11)], 'V1', out('o'), grid(1e-5, 1e9), 1e3
    yield 'capacitor-island', 'a node held by capacitors only: a pole at zero', [V('V1', 'in', '0'), Cap('C1', 'in', 'a', 1e-9), Cap('C2', 'a', '0', 3e-9), R('R1', 'in', 'o', 1e3), Cap('C3', 'o', '0', 1e-8), Cap('C4', 'a', 'o', 2e-9)], 'V1', out('a'), grid(100, 1e7), 1e5
    yield 'inductor-loop', 'two inductors in a loop: a pole at zero', [I('I1', '0', 'o'), L('L1', 'o', '0', 1e-3), L('L2', 'o', '0', 2.2e-3), R('R1', 'o', '0', 100.0), Cap('C1', 'o', '0', 1e-7)], 'I1', cur('L2'), grid(100, 1e6), 1e5
    yield 'capacitor-across-source', 'capacitors that make no pole', [V('V1', 'in', '0'), Cap('C0', 'in', '0', 1e-6), Cap('C1', 'in', 'o', 1e-9), Cap('C2', 'o', '0', 2e-9), R('R1', 'o', '0', 1e4)], 'V1', out('o'), grid(100, 1e6), 1e5
    yield 'floating-output', 'bridge, output between its corners', [V('V1', 'in', '0'), R('R1', 'in', 'a', 120.0), Cap('C1', 'a', '0', 1e-6), R('R2', 'in', 'b', 180.0), L('L1', 'b', '0', 1e-2, series_R=3.5)], 'V1', out('a', 'b'), grid(10, 1e5), 1e4
    yield 'ideal-transformer', 'source matched through an ideal transformer', [V('V1', 'in', '0'), R('RS', 'in', 'p', 600.0), L('LM', 'p', '0', 2.0), dict(ref='T1', kind='transformer', nodes=['p', '0', 's', '0'], value=8.66), R('RW', 's', 'o', 0.4), Cap('C1', 'o', '0', 1e-7), R('RL', 'o', '0', 8.0)], 'V1', out('o'), grid(1, 1e6), 1e4
    yield 'isolated-transformer', 'secondary tied to the reference by a resistor only', [V('V1', 'in', '0'), R('RS', 'in', 'p', 5.0), dict(ref='T1', kind='transformer', nodes=['p', '0', 's', 't'], value=0.5), Cap('C1', 's', 't', 1e-6), R('RL', 's', 't', 22.0), R('RG', 't', '0', 1e6)], 'V1', out('s', 't'), grid(10, 1e6), 1e4
    yield 'tight-coupling', 'two coils with k = 0.999', [V('V1', 'in', '0'), R('RS', 'in', 'a', 1.0), L('L1', 'a', '0', 1e-3), L('L2', '0', 's', 4e-3, series_R=0.2), dict(ref='K1', kind='coupling', couples=['L1', 'L2'], value=0.999), R('RL', 's', '0', 100.0), Cap('CL', 's', '0', 1e-8)], 'V1', out('s'), grid(10, 1e7), 1e5
    yield 'three-coils', 'three coupled coils', [V('V1', 'in', '0'), R('RS', 'in', 'a', 2.0), L('L1', 'a', '0', 1e-4), L('L2', 'b', '0', 2e-4), L('L3', 'c', '0', 3e-4), dict(ref='K1', kind='coupling', couples=['L1', 'L2'], value=0.6), dict(ref='K2', kind='coupling', couples=['L2', 'L3'], value=-0.4), dict(ref='K3', kind='coupling', couples=['L1', 'L3'], value=0.3), R('R2', 'b', '0', 47.0), Cap('C3', 'c', '0', 1e-9), R('R3', 'c', '0', 2e3)], 'V1', out('c'), grid(1e3, 1e8), 1e6
    yield 'one-pole-amplifier', 'inverting amplifier, gain-bandwidth 1 MHz, 100 dB', [V('V1', 'in', '0'), R('R1', 'in', 'm', 1e3), R('R2', 'm', 'o', 1e4), Cap('C2', 'm', 'o', 1e-10), dict(ref='U1', kind='opamp', nodes=['0', 'm', 'o'], gain=1e5, bandwidth_Hz=1e6), R('RL', 'o', '0', 2e3)], 'V1', out('o'), grid(1, 1e8), 1e6
    yield 'sallen-key', 'unity-gain low-pass, ideal amplifier', [V('V1', 'in', '0'), R('R1', 'in', 'a', 1e4), R('R2', 'a', 'b', 1.2e4), Cap('C1', 'a', 'o', 4.7e-9), Cap('C2', 'b', '0', 2.2e-9), dict(ref='U1', kind='opamp', nodes=['b', 'o', 'o'])], 'V1', out('o'), grid(10, 1e6), 1e5
    yield 'state-variable', 'three ideal amplifiers, band-pass output', [V('V1', 'in', '0'), R('R1', 'in', 'm', 1e4), R('R2', 'm', 'lp', 1e4), R('R3', 'm', 'hp', 1e4), R('R4', 'p', 'bp', 2e4), R('R5', 'p', '0', 1e4), dict(ref='U1', kind='opamp', nodes=['p', 'm', 'hp']), R('R6', 'hp', 'x', 1.59e4), Cap('C1', 'x', 'bp', 1e-8), dict(ref='U2', kind='opamp', nodes=['0', 'x', 'bp']), R('R7', 'bp', 'y', 1.59e4), Cap('C2', 'y', 'lp', 1e-8), dict(ref='U3', kind='opamp', nodes=['0', 'y', 'lp'])], 'V1', out('bp'), grid(10, 1e5), 6e3
    yield 'gyrator', 'two transconductances make an inductor', [I('I1', '0', 'a'), R('R1', 'a', '0', 1e4), dict(ref='G1', kind='vccs', nodes=['0', 'b'], ctrl_nodes=['a', '0'], value=1e-3), dict(ref='G2', kind='vccs', nodes=['a', '0'], ctrl_nodes=['b', '0'], value=1e-3), Cap('C1', 'b', '0', 1e-8), Cap('C2', 'a', '0', 1e-9)], 'I1', out('a'), grid(100, 1e7), 1e5
    yield 'current-controlled-voltage', 'ccvs sensing a voltage source, cccs sensing an inductor', [V('V1', 'in', '0'), R('R1', 'in', 'a', 75.0), V('VS', 'a', 'b', 0), L('L1', 'b', '0', 1e-5, series_R=1.0), dict(ref='H1', kind='ccvs', nodes=['c', '0'], ctrl_ref='VS', value=330.0), R('R2', 'c', 'o', 1e3), dict(ref='F1', kind='cccs', nodes=['o', '0'], ctrl_ref='L1', value=-0.5), Cap('C1', 'o', '0', 1e-9)], 'V1', out('o'), grid(1e3, 1e8), 1e6
    yield 'real-capacitors', 'filter with real capacitors and coil', [V('V1', 'in', '0'), R('RS', 'in', 'a', 50.0), Cap('C1', 'a', '0', 1e-7, series_R=0.02, series_L=8e-9), L('L1', 'a', 'o', 1e-5, series_R=0.05), Cap('C2', 'o', '0', 1e-5, series_R=0.3), R('RL', 'o', '0', 50.0)], 'V1', out('o'), grid(1e2, 1e9), 1e6
    yield 'small-in-large', 'milliohms in series with megohms', [I('I1', '0', 'a'), R('R1', 'a', 'b', 1e-4), L('L1', 'b', 'o', 1e-9), R('R2', 'o', '0', 1e7), Cap('C1', 'o', '0', 1e-12)], 'I1', out('o'), grid(1, 1e6), 1e5
    yield 'resistors-only', 'no pole at all', [V('V1', 'in', '0'), R('R1', 'in', 'a', 3.0), R('R2', 'a', '0', 6.0), R('R3', 'a', 'o', 2.0), R('R4', 'o', '0', 2.0)], 'V1', cur('R3'), grid(1, 1e3, 5), 1.0
    yield 'negative-resistance', 'tank with part of its loss taken back', [I('I1', '0', 'a'), R('R1', 'a', '0', 1e3), R('R2', 'a', '0', -1.2e3), L('L1', 'a', '0', 1e-4), Cap('C1', 'a', '0', 1e-9)], 'I1', out('a'), grid(1e4, 1e7), 3e6
    yield 'current-in-a-capacitor', 'current of the capacitor of a series circuit', [V('V1', 'in', '0'), R('R1', 'in', 'a', 4.7), L('L1', 'a', 'b', 1e-4), Cap('C1', 'b', '0', 1e-8)], 'V1', cur('C1'), grid(1e3, 1e7), 1e6


def spice(elements, source, freqs):
    """The netlist; `out` voltages are read from the raw file."""
    lines = ['random']
    for e in elements:
        k, r, v = e['kind'], e['ref'], e.get('value')
        n = ' '.join(e.get('nodes', []))
        ac = '1' if r == source else '0'
        if k in 'RC': lines.append('%s %s %.17g' % (r, n, v))
        elif k == 'L':
            lines.append('%s %s %s 0' % ('VS' + r, e['nodes'][0], 'x' + r))
            lines.append('%s %s %s %.17g' % (r, 'x' + r, e['nodes'][1], v))
        elif k in 'VI': lines.append('%s %s dc 0 ac %s' % (r, n, ac))
        elif k == 'coupling': lines.append('%s %s %s %.17g' % (r, e['couples'][0], e['couples'][1], v))
        elif k in ('vcvs', 'vccs'): lines.append('%s %s %s %.17g' % (r, n, ' '.join(e['ctrl_nodes']), v))
        elif k in ('ccvs', 'cccs'): lines.append('%s %s %s %.17g' % (r, n, 'VS' + e['ctrl_ref'] if e['ctrl_ref'][0] == 'L' else e['ctrl_ref'], v))
    return lines


def ngspice(elements, source, node, lo, hi):
    with tempfile.TemporaryDirectory() as d:
        raw = os.path.join(d, 'out.raw')
        text = spice(elements, source, None) + ['.control', 'set filetype=ascii', 'set numdgt=16', 'ac dec 2 %g %g' % (lo, hi), 'write %s v(%s)' % (raw, node), 'quit', '.endc', '.end']
        open(os.path.join(d, 'n.cir'), 'w').write('\n'.join(text) + '\n')
        subprocess.run(['ngspice', '-b', 'n.cir'], cwd=d, capture_output=True, timeout=30)
        if not os.path.exists(raw): return None
        values = open(raw).read().split('Values:')[1].split()
    rows, k = [], 0
    while k < len(values):
        f, h = values[k + 1], values[k + 2]
        rows.append((float(f.split(',')[0]), complex(*map(float, h.split(',')))))
        k += 3
    return rows


def random_circuit(rng):
    n = rng.randint(3, 9)
    names = ['n%d' % k for k in range(1, n + 1)]
    value = dict(R=lambda: 10 ** rng.uniform(1, 5), L=lambda: 10 ** rng.uniform(-6, -2), C=lambda: 10 ** rng.uniform(-11, -6))
    es = [V('V1', 'n1', '0') if rng.random() < 0.7 else I('I1', '0', 'n1'), R('R0', 'n1', '0', value['R']())]
    count = dict(R=0, L=0, C=0, E=0, G=0, F=0, H=0)

    def two(kind, a, b):
        count[kind] += 1
        es.append(dict(ref='%s%d' % (kind, count[kind]), kind=kind, nodes=[a, b], value=float('%.4g' % value[kind]())))

    for k in range(1, n):
        two('R', names[k], rng.choice(names[:k] + ['0']))
    for _ in range(rng.randint(2, n + 3)):
        a, b = rng.sample(names + ['0'], 2)
        two(rng.choice('RLCC'), a, b)
    coils = [e['ref'] for e in es if e['kind'] == 'L']
    if len(coils) > 1 and rng.random() < 0.6:
        es.append(dict(ref='K1', kind='coupling', couples=coils[:2], value=round(rng.uniform(-0.95, 0.95), 3)))
    for _ in range(rng.randint(0, 2)):
        kind = rng.choice(['vccs', 'cccs', 'vcvs', 'ccvs'])
        a, b = rng.sample(names[1:] + ['0'], 2)
        sensed = coils + (['V1'] if es[0]['kind'] == 'V' else [])
        if kind in ('vccs', 'vcvs'):
            c = rng.sample(names + ['0'], 2)
            letter = 'G' if kind == 'vccs' else 'E'
            count[letter] += 1
            target = [a, b]
            if kind == 'vcvs':
                target = ['e%d' % count['E'], '0']
                es.append(R('RE%d' % count['E'], target[0], a if a != '0' else b, 10 ** rng.uniform(1, 4)))
            es.append(dict(ref='%s%d' % (letter, count[letter]), kind=kind, nodes=target, ctrl_nodes=c, value=round(rng.uniform(-2, 2), 3) * (1e-3 if kind == 'vccs' else 1)))
        elif sensed:
            letter = 'F' if kind == 'cccs' else 'H'
            count[letter] += 1
            target = [a, b]
            if kind == 'ccvs':
                target = ['h%d' % count['H'], '0']
                es.append(R('RH%d' % count['H'], target[0], a if a != '0' else b, 10 ** rng.uniform(1, 4)))
            es.append(dict(ref='%s%d' % (letter, count[letter]), kind=kind, nodes=target, ctrl_ref=rng.choice(sensed), value=round(rng.uniform(-2, 2), 3) * (100 if kind == 'ccvs' else 1)))
    return es, es[0]['ref'], names[-1]


def golden():
    rng, rows, seed = random.Random(20261201), [], 0
    while len(rows) < 100:
        es, source, node = random_circuit(rng)
        found = ngspice(es, source, node, 100, 1e7)
        if not found or max(abs(h) for _, h in found) < 1e-9 or any(h != h for _, h in found): continue
        rows.append(dict(elements=es, input=source, output=out(node), freqs_Hz=[f for f, _ in found], H_re=[h.real for _, h in found], H_im=[h.imag for _, h in found]))
    head = dict(source='ngspice AC analysis, tests/circuits/make.py, seed 20261201')
    with open(GOLDEN, 'w') as file:
        file.write('{"source":%s,"circuits":[\n' % json.dumps(head['source']) + ',\n'.join(json.dumps(r, separators=(',', ':')) for r in rows) + '\n]}\n')


if __name__ == '__main__':
    for name, text, es, source, output, freqs, rate in cases():
        H = response(es, source, output, freqs)
        case = dict(name=name, description=text, source='mpmath, 50 digits; poles from det(G + sC) at 400 digits (tests/circuits/make.py)', elements=es, input=source, output=output,
                    freqs_Hz=freqs, H_re=[float(mp.re(h)) for h in H], H_im=[float(mp.im(h)) for h in H], poles_rad_s=poles(es, rate), tolerance=dict(H=1e-8, poles=1e-7))
        with open(os.path.join(HERE, name + '.json'), 'w') as file:
            file.write(json.dumps(case, indent=None, separators=(',', ':')).replace('"elements":', '\n"elements":').replace('"freqs_Hz":', '\n"freqs_Hz":').replace('"H_re":', '\n"H_re":').replace('"poles_rad_s":', '\n"poles_rad_s":') + '\n')
    golden()
