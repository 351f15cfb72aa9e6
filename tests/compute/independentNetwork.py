"""Adjusts networks of setups, levelled differences and rover positions on its own, as one dense problem.

Reads {"cases": [...]} from standard input, writes a list of solutions. Angles in radians, lengths in metres. Every shared
error is an unknown; correlated coordinates keep their full covariance matrix, so that the weight matrix is not diagonal.
A free datum is solved with a bordered matrix whose border is the numerical null space of the Jacobian.
"""

import json
import sys

import numpy as np
from independent import reduced_readings, signed
from scipy import linalg

AXES = ('easting', 'northing', 'elevation')


class Network:
    def __init__(self, case):
        self.case = case
        self.names, self.start, self.scale = [], [], []
        self.held = {}
        self.rows = []
        self.points = {point['name']: point for point in case['points']}
        self.rays, self.linear, self.observed = [], [], []
        for setup in case['setups']:
            self.add_setup(setup)
        self.ray_columns()
        for one in case['levelDifferences']:
            weight = one['weight']
            sigma = weight['sigmaPerRootKilometre'] * np.sqrt(weight['length'] / 1000)
            terms = {self.coordinate(one['to'], 2): 1, self.coordinate(one['from'], 2): -1}
            self.add_linear([terms], [one['difference']], [[sigma**2]], [('levelDifference', one['id'], None)])
        for kind, list_of in (('position', case['positions']), ('baseline', case['baselines'])):
            for one in list_of:
                end = one['point'] if kind == 'position' else one['to']
                terms = [{self.coordinate(end, a): 1} for a in range(3)]
                if kind == 'baseline':
                    for a in range(3):
                        terms[a][self.coordinate(one['from'], a)] = -1
                covariance = np.reshape(one['covariance'], (3, 3))
                self.add_linear(terms, [one[axis] for axis in AXES], covariance, [(kind, one['id'], a) for a in AXES])
        for point in case['points']:
            for a, axis in enumerate(AXES):
                vertical = a == 2
                datum = point['verticalDatum' if vertical else 'horizontalDatum']
                key = ('point', point['name'], a)
                if datum != 'weighted' or key not in self.names:
                    continue
                sigma = point['verticalSigma' if vertical else 'horizontalSigma']
                self.add_linear([{self.names.index(key): 1}], [point[axis]], [[sigma**2]],
                                [('control', point['name'], axis)])
        for index, (name, sigma) in enumerate(zip(self.names, self.priors)):
            if sigma is not None:
                kind, source = name[0], name[1]
                self.add_linear([{index: 1}], [self.start[index]], [[sigma**2]], [(kind, source, None)])
        self.start, self.scale = np.array(self.start), np.array(self.scale)
        rays = len(self.rays)
        count = rays + sum(len(values) for _, values, _, _ in self.linear)
        self.weights = np.zeros((count, count))
        self.weights[range(rays), range(rays)] = [1 / ray['sigma']**2 for ray in self.rays]
        self.factors = np.zeros((count - rays, len(self.names)))
        self.values = np.zeros(count - rays)
        row = 0
        for terms, values, covariance, _ in self.linear:
            span = slice(rays + row, rays + row + len(values))
            self.weights[span, span] = linalg.inv(np.asarray(covariance))
            for term, value in zip(terms, values):
                for column, factor in term.items():
                    if column < 0:
                        value = value - factor * self.held[column]
                    else:
                        # Counted from the start values: coordinates are large, corrections small.
                        value = value - factor * self.start[column]
                        self.factors[row, column] = factor
                self.values[row] = value
                row += 1
        self.observed += [name for *_, names in self.linear for name in names]

    # Unknowns, made where first asked for; a held coordinate is a negative key of `held`.

    @property
    def priors(self):
        return self._priors

    _priors = None

    def add(self, name, start, scale, prior=None):
        if self._priors is None:
            self._priors = []
        if name in self.names:
            return self.names.index(name)
        self.names.append(name)
        self.start.append(start)
        self.scale.append(scale)
        self._priors.append(prior)
        return len(self.names) - 1

    def coordinate(self, point, axis):
        given = self.points.get(point)
        datum = given and given['verticalDatum' if axis == 2 else 'horizontalDatum']
        if datum == 'held':
            key = -1 - (list(self.points).index(point) * 3 + axis)
            self.held[key] = given[AXES[axis]]
            return key
        return self.add(('point', point, axis), self.case['truth'][point][axis], 1e-3)

    def add_setup(self, setup):
        readings, erections, _ = reduced_readings({**setup, 'surroundings': None})
        around, stated, name = self.case['surroundings'], setup['accuracy'], setup['id']
        occupied = setup['occupied']
        truth = setup['truth']
        for r in readings:
            target, height = erections[r['erection']]
            e = r['erection']
            at = lambda a: self.coordinate(target, a)
            if occupied is None:
                stand = [self.add(('station', name, a), truth[a], 1e-3) for a in range(3)]
            else:
                stand = [self.coordinate(occupied, a) for a in range(3)]
            ray = {**r, 'setup': name, 'to': target, 'target': [at(0), at(1), at(2)], 'stand': stand,
                   'rise': height - (setup['instrumentHeight'] if occupied else 0),
                   'orientation': self.add(('orientation', name), setup['orientation'], 1e-5),
                   'along': self.add(('targetCentring', name, 'along', e), 0, 1e-3, stated['targetCentring']),
                   'across': self.add(('targetCentring', name, 'across', e), 0, 1e-3, stated['targetCentring']),
                   'up': self.add(('targetHeight', name, e), 0, 1e-3, stated['targetHeight']),
                   'k': self.add(('refraction', name), around['refraction'], 0.1, around['refractionSigma'])}
            if occupied:
                for which in ('along', 'across'):
                    ray[f'own {which}'] = self.add(('instrumentCentring', name, which), 0, 1e-3,
                                                   stated['instrumentCentring'])
                ray['own up'] = self.add(('instrumentHeight', name), 0, 1e-3, stated['targetHeight'])
            if r['face']:
                ray['collimation'] = self.add(('collimation', name), 0, 1e-5, stated['collimation'])
                ray['index'] = self.add(('verticalIndex', name), 0, 1e-5, stated['collimation'])
            self.rays.append(ray)

    def add_linear(self, terms, values, covariance, names):
        self.linear.append((terms, values, covariance, names))

    def ray_columns(self):
        self.observed = [(ray['kind'], ray['setup'], ray['to']) for ray in self.rays]
        column = lambda key: [ray.get(key) for ray in self.rays]
        self.columns = {key: column(key) for key in
                        ('orientation', 'along', 'across', 'up', 'k', 'own along', 'own across', 'own up',
                         'collimation', 'index')}
        for a in range(3):
            self.columns[f'target {a}'] = [ray['target'][a] for ray in self.rays]
            self.columns[f'stand {a}'] = [ray['stand'][a] for ray in self.rays]
        self.kinds = np.array(column('kind'))[:, None]
        self.readings = np.array(column('value'))[:, None]
        self.faces = np.array(column('face'))[:, None]
        self.rises = np.array(column('rise'))[:, None]

    def misclosures(self, u):
        """Observed minus computed at start + scale·u; u one point or many as columns."""
        points = u if u.ndim == 2 else u[:, None]
        offset = self.scale[:, None] * points

        def starts(key):
            return np.array([0.0 if c is None else self.held[c] if c < 0 else self.start[c] for c in self.columns[key]])

        def offsets(key):
            return np.array([np.zeros(points.shape[1]) if c is None or c < 0 else offset[c] for c in self.columns[key]])

        at = lambda key: starts(key)[:, None] + offsets(key)
        around = self.case['surroundings']
        radius = around['earthRadius']
        apart = [(starts(f'target {a}') - starts(f'stand {a}'))[:, None] + offsets(f'target {a}') - offsets(f'stand {a}')
                 for a in range(3)]
        turned = at('orientation')
        # The instrument stands off its mark, along and across the zero of its circle.
        east = apart[0] - at('own along') * np.sin(turned) - at('own across') * np.cos(turned)
        north = apart[1] - at('own along') * np.cos(turned) + at('own across') * np.sin(turned)
        rise = apart[2] + self.rises + at('up') - at('own up')
        length = np.hypot(east, north)
        # The reflector stands off its mark, along and across the ray.
        ahead, aside = at('along') / length, at('across') / length
        east, north = east + ahead * east + aside * north, north + ahead * north - aside * east
        ground = np.hypot(east, north) / around['combinedFactor']
        across = ground * (1 + rise / radius)
        up = rise - ground**2 / (2 * radius)
        zenith = np.arctan2(across, up) - at('k') * ground / (2 * radius)
        direction = np.arctan2(east, north) - turned + self.faces * at('collimation') / np.sin(zenith)
        rays = np.where(
            self.kinds == 'direction', signed(self.readings - direction),
            np.where(self.kinds == 'zenith', signed(self.readings - zenith - self.faces * at('index')),
                     self.readings - np.hypot(across, up)))
        result = np.concatenate([rays, self.values[:, None] - self.factors @ offset])
        return result if u.ndim == 2 else result[:, 0]

    def jacobian(self, u, h=0.1):
        steps = h * np.eye(len(u))
        return (self.misclosures(u[:, None] + steps) - self.misclosures(u[:, None] - steps)) / (2 * h)


def solve(case):
    network = Network(case)
    n = len(network.names)
    u = np.zeros(n)
    scale = network.scale
    # The start of the corrections that a free datum keeps small is the coordinates as given.
    given = np.array([network.points[name[1]][AXES[name[2]]] if name[0] == 'point' and name[1] in network.points
                      else np.nan for name in network.names])
    free = np.array([name[0] == 'point' and network.points.get(name[1], {}).get('horizontalDatum') == 'free'
                     for name in network.names])
    p = network.weights
    for _ in range(12):
        j, v = network.jacobian(u), network.misclosures(u)
        normal = j.T @ p @ j
        border = np.zeros((n, 0))
        off = np.zeros(0)
        if case['free']:
            lower = linalg.cholesky(p, lower=True)
            _, values, vectors = linalg.svd(lower.T @ j / np.sqrt(np.diag(normal)))
            movements = (vectors[-case['free']:] / np.sqrt(np.diag(normal))).T * scale[:, None]
            border = np.where(free[:, None], movements, 0)
            border /= linalg.norm(border, axis=0)
            off = border[free].T @ (given - network.start - scale * u)[free]
            border = border * scale[:, None]
        d = border.shape[1]
        balance = np.sqrt(np.diag(normal))
        weight = linalg.norm(border / balance[:, None], axis=0) if d else np.zeros(0)
        bordered = np.block([[normal / np.outer(balance, balance), border / balance[:, None] / weight],
                             [(border / balance[:, None] / weight).T, np.zeros((d, d))]])
        inverse = linalg.inv(bordered)
        step = inverse @ np.concatenate([-(j.T @ p @ v) / balance, off / weight])
        u = u + step[:n] / balance
    v, j = network.misclosures(u), network.jacobian(u)
    q = inverse[:n, :n] / np.outer(balance, balance)
    spread = linalg.inv(p) - j @ q @ j.T
    information = np.diag(p @ spread @ p)
    x = network.start + scale * u
    names = sorted({name[1] for name in network.names if name[0] == 'point'})
    index = {name: i for i, name in enumerate(network.names)}
    points = {}
    for name in names:
        own = [index.get(('point', name, a)) for a in range(3)]
        points[name] = {
            'at': [x[i] if i is not None else None for i in own],
            'covariance': [scale[a] * q[a, b] * scale[b] if a is not None and b is not None else 0
                           for a in own for b in own],
        }
    return {
        'points': points,
        'weightedSquares': float(v @ p @ v),
        'degreesOfFreedom': len(v) - n + case['free'],
        'observations': [
            {'kind': name[0], 'source': name[1], 'residual': v[i], 'redundancy': information[i] / p[i, i],
             'standardised': (p @ v)[i] / np.sqrt(max(information[i], 1e-300)), 'sigma': 1 / np.sqrt(information[i])
             if information[i] > 1e-9 * p[i, i] else None}
            for i, name in enumerate(network.observed)
        ],
    }


if __name__ == '__main__':
    json.dump([solve(case) for case in json.load(sys.stdin)['cases']], sys.stdout)
