#!/usr/bin/env python3
"""Golden journals and their figures, worked out by plain arithmetic and not by the engine.

`python3 tests/unit/golden/work-out.py` writes the journals (*.ndjson) and expected.json beside itself; running it again
changes nothing. Every car here rolls at whole pulses a second, so that its count at any instant is a straight line and every
instant asked for is one division. All courses are invented.

Rules used (each stated where the figure is worked out):
  distance     D = official distance of the last touched place + pulses since x scale
  ratio        new scale = old x official leg / measured leg (common practice, no source); the leg runs from the last place that
               set the scale, before the first from the settle place; not at a settle place, not on a leg shorter than
               2 sigma/sigma_scale with sigma_scale 0.3 % before the first correction and 0.1 % after it
  gain         new scale = old x ratio ** g, g = s2 / (s2 + 2 sigma2 / leg2), s2 grown by 1.2e-11 a metre
  place sigma  sqrt((scatter x speed)^2 + (last printed decimal / sqrt 12)^2 + 1 m2)
  schedule     length over average, neutral sections their own time
  mile         1609.344 m (1959 agreement, NIST SP 811)
"""
import json
import math
import os
from fractions import Fraction

HERE = os.path.dirname(os.path.abspath(__file__))
RELEASE_MS = 1_800_000_000_000
RELEASE_US = 60_000_000
MILE = Fraction(1609344, 1000)


def metres(text, unit):
    return Fraction(text) * (MILE if unit == 'mi' else 1000)


def speed(text, unit):
    return Fraction(text) * (MILE if unit == 'mph' else 1000) / 3600


# --- the journal ---------------------------------------------------------------------------------------------------------


def place(ident, duty, text, unit):
    return {'id': ident, 'name': ident.capitalize(), 'duty': duty, 'at': {'text': text, 'unit': unit}, 'source': 'official',
            'side': None, 'note': '', 'position': None}


def pack(name, unit, places, sections, target_ms, mm, rule='ratio', zones=(), cap=None, lead=0):
    speed_unit = 'mph' if unit == 'mi' else 'km/h'
    return {
        'format': 1,
        'event': {'id': 'event-' + name, 'name': 'Golden ' + name, 'place': 'Marram', 'timeZone': 'Europe/London',
                  'rules': {'timeStart': 'scheduled', 'timeUnitMs': 10, 'rounding': 'cut', 'timeBasis': 'elapsed', 'ties': 'shared', 'sumOfRuns': 1}},
        'team': {'id': 'team', 'name': 'Golden'},
        'entry': {'id': 'entry', 'number': '1', 'crew': []},
        'attempt': {'id': 'attempt', 'number': 1, 'releaseMs': RELEASE_MS, 'stagedBehindM': 0},
        'courseBook': {'id': 'book', 'version': 1, 'name': name, 'unit': unit, 'checkpoints': [place(*p, unit) for p in places],
                       'zones': list(zones), 'slowDownLimit': None, 'notes': ''},
        'raceClass': {'id': 'class', 'name': name, 'targetTimeMs': target_ms, 'sections': sections,
                      'cap': cap, 'floor': None, 'aids': {'wheel': True, 'gnssSpeed': False, 'gnssPosition': False, 'dataLink': False}},
        'ownCheckpoints': [], 'crewZones': [],
        'car': {'id': 'car', 'name': 'Car', 'dialReadsHighPercent': 0},
        'wheel': {'setupId': 'wheel', 'setupName': 'left', 'channel': 0, 'pulsesPerTurn': 4, 'mmPerPulse': mm, 'scaleSigma': 0.003, 'scaleSource': 'nominal'},
        'plan': {'acceleration': 2.5, 'deceleration': 4, 'capMargin': 0.02},
        'settings': {'speedUnit': speed_unit, 'scaleRule': rule, 'tapLeadMs': {'glass': lead, 'wired': 0}, 'tapScatterMs': 100, 'buttonSide': 'right'},
    }


def us(t):
    """Session instant of t seconds after the release."""
    value = RELEASE_US + Fraction(t) * 1_000_000
    assert value.denominator == 1, t
    return int(value)


class Wheel:
    """Phases of (from second, pulses a second); the count is exact at any instant."""

    def __init__(self, phases):
        self.phases = [(Fraction(t), Fraction(r)) for t, r in phases]

    def count(self, t):
        total = Fraction(0)
        for i, (begin, rate) in enumerate(self.phases):
            end = self.phases[i + 1][0] if i + 1 < len(self.phases) else None
            if t <= begin:
                break
            total += rate * ((t if end is None or t < end else end) - begin)
        return total

    def instant(self, count):
        total = Fraction(0)
        for i, (begin, rate) in enumerate(self.phases):
            end = self.phases[i + 1][0] if i + 1 < len(self.phases) else None
            if end is None or total + rate * (end - begin) >= count:
                return begin + (count - total) / rate
            total += rate * (end - begin)
        raise ValueError


def journal(name, p, wheel, until, acts=(), every=2, first=0, box=0, wild=()):
    """Pulses every few seconds and acts by (second, observation); an act `of` a tap is given that tap's seq."""
    rows = [(us(-50), {'type': 'epoch.v1', 'n': 0, 'mono': 1000, 'wall': RELEASE_MS - 50_400, 'bridgedBy': 'first', 'uncertaintyMs': 0}),
            (us(-40), {'type': 'clock.v1', 'source': 'exchange', 'officialMs': RELEASE_MS - 40_000, 'uncertaintyMs': 4})]
    for t in range(-20, until + 1, every):
        count = wheel.count(t)
        assert count.denominator == 1, (t, count)
        rows.append((us(t), {'type': 'pulse.v1', 'channel': 0, 'count': (first + int(count)) % 2**32, 'boxUs': (us(t) + box) % 2**32}))
    for t in wild:
        rows.append((us(t), {'type': 'pulse.v1', 'channel': 0, 'count': 0, 'boxUs': 0}))
    rows += [(us(t), o) for t, o in acts]
    rows.sort(key=lambda r: r[0])
    seqs = {id(o): seq for seq, (_, o) in enumerate(rows)}
    lines = [json.dumps({
        'format': 'evenline-journal', 'version': 1, 'runId': '018f0000-0000-7000-8000-00000000000' + str(len(name) % 10), 'deviceId': 'device',
        'entryId': 'entry', 'attemptId': 'attempt', 'packDigest': '0' * 64, 'pack': p, 'clockRate': 1, 'practice': True,
        'createdMs': RELEASE_MS - 60_000, 'appVersion': '0.1.0'}, separators=(',', ':'))]
    for seq, (at, o) in enumerate(rows):
        o = dict(o)
        if 'of' in o:
            o['tap'] = seqs[id(o.pop('of'))]
        lines.append(json.dumps({'seq': seq, 'at': at, **o}, separators=(',', ':')))
    with open(os.path.join(HERE, name + '.ndjson'), 'w') as f:
        f.write('\n'.join(lines) + '\n')


def tap(checkpoint=None):
    return {'type': 'tap.v1', 'input': 'glass', 'checkpoint': checkpoint}


# --- the figures ---------------------------------------------------------------------------------------------------------


def whole_us(t):
    """Passings are kept to the whole microsecond."""
    return math.floor(Fraction(t) * 1_000_000 + Fraction(1, 2)) / 1e6


def row(ident, by, t, target, **more):
    return {'checkpointId': ident, 'by': by, 'elapsedS': whole_us(t), 'targetS': float(target), 'timeErrorS': whole_us(t) - float(target), **more}


def place_sigma2(scatter, v, fineness):
    return (scatter * v) ** 2 + fineness**2 / 12 + 4


def constant_speed():
    """20 km at 72 km/h; the car stands 1 s too long and then rolls at 197 pulses a second of 100 mm: 19.7 m/s."""
    places = [('start', 'start', '0.000'), ('mill', 'place', '5.000'), ('weir', 'place', '12.345'), ('finish', 'finish', '20.000'), ('board', 'stop board', '20.600')]
    sections = [{'kind': 'average', 'to': {'text': '20.000', 'unit': 'km'}, 'average': {'text': '72', 'unit': 'km/h'}}]
    wheel = Wheel([(1, 197)])
    journal('constant-speed', pack('constant-speed', 'km', places, sections, 1_000_000, 100), wheel, 1060)
    v, target_v = Fraction(197, 10), Fraction(20)
    legs = [row(i, 'distance', 1 + metres(d, 'km') / v, metres(d, 'km') / target_v, scaleAfter=100) for i, duty, d in places[1:4]]
    return {'reactionS': 1, 'legs': legs, 'finish': {'elapsedS': legs[-1]['elapsedS'], 'timeErrorS': legs[-1]['timeErrorS']}}


def miles_scale():
    """20 miles at 54 mph. Settle, scale, a leg too short (which adds to the next), scale, a place without a touch, the finish by distance; lead 150 ms."""
    unit, lead, rate, mm = 'mi', Fraction(15, 100), 50, 480
    places = [('start', 'start', '0.00'), ('gate', 'settle', '1.50'), ('barn', 'scale', '7.50'), ('fold', 'scale', '9.00'), ('tarn', 'scale', '16.00'),
              ('cairn', 'place', '18.00'), ('finish', 'finish', '20.00')]
    sections = [{'kind': 'average', 'to': {'text': '20.00', 'unit': 'mi'}, 'average': {'text': '54', 'unit': 'mph'}}]
    # touches, seconds after the release: about where a wheel of 483.1 mm would be, a little off as hands are
    touches = {'gate': Fraction('101.137'), 'barn': Fraction('500.912'), 'fold': Fraction('600.706'), 'tarn': Fraction('1067.203')}
    wheel = Wheel([(1, rate)])
    p = pack('miles-scale', unit, places, sections, 1_333_333, mm, lead=150)
    journal('miles-scale', p, wheel, 1360, [(t, tap(i if i == 'fold' else None)) for i, t in touches.items()])
    target = Fraction(1_333_333, 1000)
    sigma = math.sqrt(place_sigma2(0.1, rate * mm / 1000, float(metres('0.01', unit))))
    k, d, w, corrected, legs = Fraction(mm), Fraction(0), Fraction(0), False, []
    since = (d, w)  # official distance and count from which the scale's leg runs
    for ident, duty, text in places[1:]:
        official = metres(text, unit)
        aim = target * official / metres('20.00', unit)
        if ident not in touches:
            t = wheel.instant(w + (official - d) * 1000 / k)
            legs.append(row(ident, 'distance', t, aim, scaleAfter=float(k)))
            continue
        t = touches[ident] - lead
        measured = (wheel.count(t) - w) * k / 1000
        leg = official - since[0]
        shortest = 2 * sigma / (0.001 if corrected else 0.003)
        kept = 'settle' if duty == 'settle' else 'place' if duty == 'place' else 'leg too short' if leg < shortest else None
        before, moved = k, official - d - measured
        if kept is None:
            k, corrected = leg * 1000 / (wheel.count(t) - since[1]), True
        if kept in (None, 'settle'):
            since = (official, wheel.count(t))
        legs.append(row(ident, 'tap', t, aim, movedM=float(moved), measuredM=float(d + measured), scaleBefore=float(before), scaleAfter=float(k), scaleKept=kept))
        d, w = official, wheel.count(t)
    return {'reactionS': 1, 'legs': legs, 'finish': {'elapsedS': legs[-1]['elapsedS'], 'timeErrorS': legs[-1]['timeErrorS']}}


def sections_zone():
    """6 km at 60 km/h, 1 km neutral in 90 s, 9 km at 80 km/h with a zone; the plan by a fine grid and halving."""
    places = [('start', 'start', '0.000'), ('ash', 'place', '3.000'), ('neutral', 'place', '6.000'), ('restart', 'place', '7.000'), ('zone', 'place', '9.000'),
              ('clear', 'place', '9.600'), ('finish', 'finish', '16.000')]
    km = lambda text: {'text': text, 'unit': 'km'}
    sections = [{'kind': 'average', 'to': km('6.000'), 'average': {'text': '60', 'unit': 'km/h'}}, {'kind': 'neutral', 'to': km('7.000'), 'timeMs': 90_000},
                {'kind': 'average', 'to': km('16.000'), 'average': {'text': '80', 'unit': 'km/h'}}]
    zone = {'id': 'z', 'name': 'Hamlet', 'from': km('9.000'), 'to': km('9.600'), 'limit': {'text': '40', 'unit': 'km/h'}, 'source': 'official'}
    wheel = Wheel([(0, 80), (370, 55), (460, 110), (560, 50), (610, 112)])
    p = pack('sections-zone', 'km', places, sections, 360_000 + 90_000 + 405_000, 210, zones=[zone], cap={'text': '100', 'unit': 'km/h'})
    journal('sections-zone', p, wheel, 900)
    edges = [(0, 6000, Fraction(6000, 360)), (6000, 7000, Fraction(1000, 90)), (7000, 16000, Fraction(9000, 405))]
    aim = lambda x: sum((min(x, b) - a) / v for a, b, v in edges if x > a)
    planned = grid_plan(edges, [(9000, 9600, float(speed('40', 'km/h')))], 0.98 * float(speed('100', 'km/h')), 855.0)
    legs = []
    for ident, _, text in places[1:]:
        x = metres(text, 'km')
        legs.append(row(ident, 'distance', wheel.instant(x * 1000 / 210), aim(x), plannedS=planned[int(x)] - float(aim(x))))
    return {'reactionS': 0, 'legs': legs, 'finish': {'elapsedS': legs[-1]['elapsedS'], 'timeErrorS': legs[-1]['timeErrorS']}}


def grid_plan(edges, zones, top, time, step=0.5, a=2.5, d=4.0):
    """Planned time at every whole metre: speeds on a grid, forwards by acceleration, backwards by braking, one ratio by halving."""
    n = int(edges[-1][1] / step)

    def times(ratio):
        limit = []
        for i in range(n):
            x = (i + 0.5) * step
            v = min(top, ratio * float(next(v for b, e, v in edges if b <= x < e)))
            limit.append(min([v] + [u for b, e, u in zones if b <= x < e]))
        v = [0.0] * (n + 1)
        for i in range(n):
            v[i + 1] = min(math.sqrt(v[i] ** 2 + 2 * a * step), limit[i], limit[min(i + 1, n - 1)])
        for i in range(n - 1, 0, -1):
            v[i] = min(v[i], math.sqrt(v[i + 1] ** 2 + 2 * d * step))
        t = [0.0]
        for i in range(n):
            t.append(t[-1] + 2 * step / (v[i] + v[i + 1]))
        return t

    low, high = 0.5, 2.0
    for _ in range(45):
        middle = (low + high) / 2
        if times(middle)[-1] > time:
            low = middle
        else:
            high = middle
    t = times((low + high) / 2)
    return {m: t[int(m / step)] for m in range(0, int(edges[-1][1]) + 1)}


def voided_tap():
    """A touch 2 s late at the barn is used, then voided 30 s on; a double touch at the tarn. As if only gate and tarn had been touched."""
    places = [('start', 'start', '0.000'), ('gate', 'settle', '3.000'), ('barn', 'scale', '10.000'), ('tarn', 'scale', '22.000'), ('finish', 'finish', '25.000')]
    sections = [{'kind': 'average', 'to': {'text': '25.000', 'unit': 'km'}, 'average': {'text': '90', 'unit': 'km/h'}}]
    wheel, mm = Wheel([(2, 100)]), 250
    gate, wrong, tarn = Fraction('121.25'), Fraction('404.5'), Fraction('885.125')
    late = tap('barn')
    acts = [(gate, tap()), (wrong, late), (wrong + 30, {'type': 'tap-voided.v1', 'of': late}), (tarn, tap()), (tarn + Fraction(1, 2), tap())]
    journal('voided-tap', pack('voided-tap', 'km', places, sections, 1_000_000, mm), wheel, 1040, acts)
    k, legs = Fraction(mm), []
    aim = lambda x: Fraction(x, 25)
    measured = wheel.count(gate) * k / 1000
    legs.append(row('gate', 'tap', gate, aim(3000), movedM=float(3000 - measured), scaleAfter=mm, scaleKept='settle'))
    w = wheel.count(gate)
    legs.append(row('barn', 'distance', wheel.instant(w + 7000 * 1000 / k), aim(10000), scaleAfter=mm))
    measured = (wheel.count(tarn) - w) * k / 1000
    k2 = k * 19000 / measured
    legs.append(row('tarn', 'tap', tarn, aim(22000), movedM=float(19000 - measured), scaleBefore=mm, scaleAfter=float(k2), scaleKept=None))
    legs.append(row('finish', 'distance', wheel.instant(wheel.count(tarn) + 3000 * 1000 / k2), aim(25000), scaleAfter=float(k2)))
    return {'reactionS': 2, 'legs': legs, 'finish': {'elapsedS': legs[-1]['elapsedS'], 'timeErrorS': legs[-1]['timeErrorS']},
            'verdicts': 'used voided used repeated'}


def box_wrap():
    """Count and box clock pass 2^32, two records are all zeros, the gain rule corrects twice."""
    places = [('start', 'start', '0.000'), ('gate', 'settle', '4.000'), ('barn', 'scale', '12.000'), ('tarn', 'scale', '26.000'), ('finish', 'finish', '30.000')]
    sections = [{'kind': 'average', 'to': {'text': '30.000', 'unit': 'km'}, 'average': {'text': '120', 'unit': 'km/h'}}]
    mm, rate = 250, 132
    wheel = Wheel([(1, rate)])
    touches = {'gate': Fraction('121.8'), 'barn': Fraction('363.3'), 'tarn': Fraction('785.9')}
    p = pack('box-wrap', 'km', places, sections, 900_000, mm, rule='gain')
    journal('box-wrap', p, wheel, 940, [(t, tap(i)) for i, t in touches.items()], first=2**32 - 30_000, box=2**32 - RELEASE_US - 500_000_000, wild=[301, Fraction('555.5')])
    sigma2 = place_sigma2(0.1, rate * mm / 1000, 1.0)
    k, d, w, s2, legs = float(mm), 0.0, 0.0, 0.003**2, []
    for ident, duty, text in places[1:]:
        official = float(metres(text, 'km'))
        aim = official / (100 / 3)
        if ident == 'finish':
            legs.append(row(ident, 'distance', wheel.instant(Fraction(w + (official - d) * 1000 / k)), aim, scaleAfter=k))
            break
        t = touches[ident]
        measured = (float(wheel.count(t)) - w) * k / 1000
        leg = official - d
        s2 += 1.2e-11 * measured
        before = k
        if duty == 'scale':
            g = s2 / (s2 + 2 * sigma2 / leg**2)
            k *= (leg / measured) ** g
            s2 *= 1 - g
        legs.append(row(ident, 'tap', t, aim, movedM=leg - measured, scaleBefore=before, scaleAfter=k, scaleKept=None if duty == 'scale' else 'settle'))
        d, w = official, float(wheel.count(t))
    return {'reactionS': 1, 'legs': legs, 'finish': {'elapsedS': legs[-1]['elapsedS'], 'timeErrorS': legs[-1]['timeErrorS']}, 'pulses': int(wheel.count(940))}


if __name__ == '__main__':
    expected = {'constant-speed': constant_speed(), 'miles-scale': miles_scale(), 'sections-zone': sections_zone(), 'voided-tap': voided_tap(), 'box-wrap': box_wrap()}
    with open(os.path.join(HERE, 'expected.json'), 'w') as f:
        json.dump(expected, f, indent=2)
        f.write('\n')
