"""Solves free stations from raw pointings, on its own: face means, model and statistics are written here again.

Reads {"cases": [...]} from standard input, writes a list of solutions. Angles in radians, lengths in metres. Every
case is solved twice:

 1. with an unknown for every error (coordinates of each mark, centring and height of each reflector, refraction,
    collimation, index, scale), each held by a pseudo-observation, by scipy.optimize.least_squares and a central
    difference Jacobian;
 2. with the station's four unknowns alone (and heights of marks that have none): all common errors stand in one
    full covariance matrix of the readings, whose inverse is the weight matrix.
"""

import json
import sys

import numpy as np
from scipy import linalg, optimize

TURN = 2 * np.pi


def signed(angle):
    return (angle + np.pi) % TURN - np.pi


def circular_mean(angles):
    return angles[0] + np.mean([signed(a - angles[0]) for a in angles])


def reduced_readings(case):
    """Face means per erection and set: value, standard deviation, and +1, −1 or 0 for the collimation left in."""
    stated, ppm = case['accuracy'], case['ppm']
    groups, erections = {}, {}
    for shot in case['shots']:
        erection = erections.setdefault((shot['target'], shot['targetHeight']), len(erections))
        groups.setdefault((erection, shot['set']), []).append(shot)
    marks = list(dict.fromkeys(target for target, _ in erections))
    readings = []
    for (erection, number), shots in groups.items():
        target = list(erections)[erection][0]
        common = {'erection': erection, 'mark': marks.index(target), 'set': number}
        for kind, flip in (('direction', lambda a: a - np.pi), ('zenith', lambda a: TURN - a)):
            left = [shot[kind] for shot in shots if shot['face'] == 'left']
            right = [flip(shot[kind]) for shot in shots if shot['face'] == 'right']
            single = np.sqrt(2) * stated[kind]
            if left and right:
                l = circular_mean(left)
                value = l + signed(circular_mean(right) - l) / 2
                sigma = np.sqrt(single**2 / len(left) + single**2 / len(right)) / 2
                face = 0
            else:
                value = circular_mean(left or right)
                sigma = single / np.sqrt(len(left or right))
                face = 1 if left else -1
            readings.append({**common, 'kind': kind, 'value': value, 'sigma': sigma, 'face': face})
        slopes = [
            (s['slope'] + (s['constant'] - s['constantApplied']) / 1000)
            * (1 + (0 if ppm is None else (ppm - s['appliedPpm']) * 1e-6))
            for s in shots
        ]
        slope = np.mean(slopes)
        sigma = (stated['distance'] + stated['distancePpm'] * 1e-6 * slope) / np.sqrt(len(slopes))
        readings.append({**common, 'kind': 'distance', 'value': slope, 'sigma': sigma, 'face': 0})
    readings.sort(key=lambda reading: reading['mark'])
    return readings, list(erections), marks


class Setup:
    """Names every unknown, with its start value, its scale and, where it is held, its standard deviation."""

    def __init__(self, case):
        self.case = case
        self.readings, self.erections, self.marks = reduced_readings(case)
        self.names, self.start, self.scale, self.held = [], [], [], []
        stated, around, start = case['accuracy'], case['surroundings'], case['start']
        self.add('E', start['easting'], 1e-3)
        self.add('N', start['northing'], 1e-3)
        self.add('H', start['axis'], 1e-3)
        self.add('o', start['orientation'], 1e-5)
        self.add('k', around['refraction'], around['refractionSigma'], held=True)
        if any(r['face'] for r in self.readings):
            self.add('c', 0, stated['collimation'], held=True)
            self.add('i', 0, stated['collimation'], held=True)
        if case['ppm'] is None:
            self.add('s', 0, around['unknownAtmospherePpm'] * 1e-6, held=True)
        for m, name in enumerate(self.marks):
            mark = case['control'][name]
            self.add(f'E{m}', mark['easting'], mark['horizontalSigma'], held=True)
            self.add(f'N{m}', mark['northing'], mark['horizontalSigma'], held=True)
            known = mark['elevation'] is not None
            self.add(f'H{m}', mark['elevation'] if known else start['heights'][name],
                     mark['verticalSigma'] if known else 1e-3, held=known)
        for e in range(len(self.erections)):
            self.add(f'e{e}', 0, stated['targetCentring'], held=True)
            self.add(f'n{e}', 0, stated['targetCentring'], held=True)
            self.add(f'h{e}', 0, stated['targetHeight'], held=True)
        self.start, self.scale = np.array(self.start), np.array(self.scale)
        self.held = np.array(self.held)
        self.index = {name: i for i, name in enumerate(self.names)}
        column = lambda what: np.array([r[what] for r in self.readings])
        self.values, self.sigmas = column('value')[:, None], column('sigma')[:, None]
        self.faces, self.kinds = column('face')[:, None], column('kind')
        of_mark = lambda axis: [self.index[f'{axis}{r["mark"]}'] for r in self.readings]
        of_erection = lambda axis: [self.index[f'{axis}{r["erection"]}'] for r in self.readings]
        self.mark_columns = [of_mark(axis) for axis in 'ENH']
        self.erection_columns = [of_erection(axis) for axis in 'enh']
        self.target_heights = np.array([self.erections[r['erection']][1] for r in self.readings])[:, None]

    def add(self, name, value, scale, held=False):
        self.names.append(name)
        self.start.append(value)
        self.scale.append(scale)
        self.held.append(held)

    def misclosures(self, u):
        """Observed minus computed in standard deviations, at start + scale·u: readings, then held unknowns.

        Takes one point, or many as columns.
        """
        points = u if u.ndim == 2 else u[:, None]
        offset = self.scale[:, None] * points
        start = self.start[:, None]
        at = lambda name: offset[self.index[name]] if name in self.index else 0.0
        around = self.case['surroundings']
        radius = around['earthRadius']

        def difference(axis):
            # Start values first: grid coordinates are large, offsets small.
            mark, erection = self.mark_columns[axis], self.erection_columns[axis]
            return (start[mark] - start[axis]) + (offset[mark] + offset[erection] - offset[axis])

        east, north, rise = difference(0), difference(1), difference(2) + self.target_heights
        ground = np.hypot(east, north) / around['combinedFactor']
        across = ground * (1 + rise / radius)
        up = rise - ground**2 / (2 * radius)
        k = self.start[self.index['k']] + at('k')
        zenith = np.arctan2(across, up) - k * ground / (2 * radius)
        azimuth = np.arctan2(east, north) - self.start[self.index['o']] - at('o')
        kinds = self.kinds[:, None]
        misclosure = np.where(
            kinds == 'direction', signed(self.values - azimuth - self.faces * at('c') / np.sin(zenith)),
            np.where(kinds == 'zenith', signed(self.values - zenith - self.faces * at('i')),
                     self.values - np.hypot(across, up) * (1 + at('s'))))
        result = np.concatenate([misclosure / self.sigmas, -points[self.held]])
        return result if u.ndim == 2 else result[:, 0]

    def jacobian(self, u, h=0.1):
        steps = h * np.eye(len(u))
        return (self.misclosures(u[:, None] + steps) - self.misclosures(u[:, None] - steps)) / (2 * h)


def solve(case):
    setup = Setup(case)
    found = optimize.least_squares(
        setup.misclosures, np.zeros(len(setup.names)), jac=setup.jacobian,
        xtol=1e-15, ftol=1e-15, gtol=1e-15)
    u = found.x
    for _ in range(3):
        u = u - linalg.lstsq(setup.jacobian(u), setup.misclosures(u))[0]
    v, j = setup.misclosures(u), setup.jacobian(u)
    q = linalg.inv(j.T @ j)
    scale = setup.scale
    count = len(setup.readings)
    redundancy = 1 - np.einsum('ij,jk,ik->i', j, q, j)[:count]
    x = setup.start + scale * u
    return {
        'unknowns': x[:5].tolist(),
        'covariance': (scale[:5, None] * q[:5, :5] * scale[None, :5]).tolist(),
        'withPublished': {name: with_published(setup, q, m) for m, name in enumerate(setup.marks)},
        'weightedSquares': float(v @ v),
        'degreesOfFreedom': len(v) - len(u),
        'readings': [
            {'target': setup.marks[r['mark']], 'kind': r['kind'], 'set': r['set'],
             'residual': v[i] * r['sigma'], 'redundancy': redundancy[i]}
            for i, r in enumerate(setup.readings)
        ],
        'fullWeights': by_full_weights(setup, u, v, j, count),
        'polar': {name: polar_residual(setup, x, m) for m, name in enumerate(setup.marks)},
    }


def with_published(setup, q, m):
    """Covariance of the station's unknowns with the published coordinates of a mark, which are observations."""
    columns = [setup.index[f'{axis}{m}'] for axis in 'ENH']
    covariance = setup.scale[:5, None] * q[:5, columns] * setup.scale[None, columns]
    return (covariance * setup.held[columns]).tolist()


def polar_residual(setup, x, m):
    """Mean position that a mark has by the fitted station and its readings, minus its published coordinates."""
    around = setup.case['surroundings']
    mark = setup.case['control'][setup.marks[m]]
    groups = {}
    for r in setup.readings:
        if r['mark'] == m:
            groups.setdefault((r['erection'], r['set']), {})[r['kind']] = r['value']

    def position(erection, read):
        def misclosure(offset):
            ground, rise = offset
            across = ground * (1 + rise / around['earthRadius'])
            up = rise - ground**2 / (2 * around['earthRadius'])
            zenith = np.arctan2(across, up) - x[4] * ground / (2 * around['earthRadius'])
            return [(zenith - read['zenith']) * read['distance'], np.hypot(across, up) - read['distance']]

        start = read['distance'] * np.array([np.sin(read['zenith']), np.cos(read['zenith'])])
        ground, rise = optimize.fsolve(misclosure, start, xtol=1e-13)
        grid = ground * around['combinedFactor']
        azimuth = x[3] + read['direction']
        return [x[0] + grid * np.sin(azimuth), x[1] + grid * np.cos(azimuth),
                x[2] + rise - setup.erections[erection][1]]

    east, north, up = np.mean([position(e, read) for (e, _), read in groups.items()], axis=0)
    known = mark['elevation'] is not None
    return [east - mark['easting'], north - mark['northing'], up - mark['elevation'] if known else None]


def by_full_weights(setup, u, v, j, count):
    """Generalised least squares: the held errors are part of the readings' covariance matrix."""
    a, common = -j[:count][:, ~setup.held], -j[:count][:, setup.held]
    # Misclosures with every common error at the value that it is held at, in units of each reading's sigma.
    y = v[:count] + common @ u[setup.held]
    weights = linalg.inv(np.eye(count) + common @ common.T)
    q = linalg.inv(a.T @ weights @ a)
    projector = weights - weights @ a @ q @ a.T @ weights
    scale = setup.scale[~setup.held]
    errors = projector @ y
    return {
        'covariance': (scale[:4, None] * q[:4, :4] * scale[None, :4]).tolist(),
        'weightedSquares': float(y @ projector @ y),
        'redundancy': np.diag(projector).tolist(),
        'standardised': (errors / np.sqrt(np.diag(projector))).tolist(),
    }


if __name__ == '__main__':
    json.dump([solve(case) for case in json.load(sys.stdin)['cases']], sys.stdout)
