"""Names the points behind unnamed shots by SciPy's k-d tree: what a short script of one's own would do.

Reads sites from standard input, writes for each the names (null for a stray) and the milliseconds. It takes the
shortest distances between shots first, asks the tree for all pairs of points no farther apart, keeps those of the same
distance and the same rise, lays the shots onto each and counts the points found. It stops at the first pair of shots
under which three quarters of the shots find a point.
"""

import itertools
import json
import math
import sys
import time

import numpy as np
from scipy.spatial import cKDTree

RADIUS = 6371008.8
REFRACTION = 0.13
# A tolerance for everything, m: the simulated errors of shots, marks and reflectors together.
CLOSE = 0.05


def place(shot, ppm, factor):
    """East, north (circle's zero up) and height of a mark from the tilting axis."""
    constant = (shot['prismConstantMm'] - shot['prismConstantAppliedMm']) / 1000
    slope = (shot['slopeDistance'] + constant) * (1 + (ppm - shot['appliedPpm']) * 1e-6)
    ground = slope * math.sin(shot['zenith'])
    zenith = shot['zenith'] - (1 - REFRACTION / 2) * ground / RADIUS + ground / (2 * RADIUS)
    rise = slope * math.cos(shot['zenith']) + (1 - REFRACTION) * ground**2 / (2 * RADIUS)
    grid = slope * math.sin(zenith) * factor
    return grid * math.sin(shot['direction']), grid * math.cos(shot['direction']), rise - shot['targetHeight']


def identify(tree, plan, heights, shots):
    pairs = sorted(
        itertools.combinations(range(len(shots)), 2),
        key=lambda pair: np.hypot(*(shots[pair[0], :2] - shots[pair[1], :2])),
    )
    for i, j in pairs:
        line = shots[j] - shots[i]
        length = math.hypot(line[0], line[1])
        near = tree.query_pairs(length + CLOSE, output_type='ndarray')
        both = np.vstack([near, near[:, ::-1]])
        across = plan[both[:, 1]] - plan[both[:, 0]]
        fits = np.abs(np.hypot(across[:, 0], across[:, 1]) - length) < CLOSE
        fits &= np.abs(heights[both[:, 1]] - heights[both[:, 0]] - line[2]) < CLOSE
        best, most = None, 0
        for (a, _), (east, north) in zip(both[fits], across[fits]):
            turn = math.atan2(east, north) - math.atan2(line[0], line[1])
            c, s = math.cos(turn), math.sin(turn)
            from_first = shots - shots[i]
            at = plan[a] + np.column_stack(
                [c * from_first[:, 0] + s * from_first[:, 1], c * from_first[:, 1] - s * from_first[:, 0]]
            )
            # The pair's own errors swing what is far from it.
            lever = CLOSE * (1 + np.hypot(from_first[:, 0], from_first[:, 1]) / length)
            distance, point = tree.query(at)
            found = (distance < lever) & (np.abs(heights[point] - heights[a] - from_first[:, 2]) < CLOSE)
            if found.sum() > most:
                best, most = np.where(found, point, -1), int(found.sum())
        if 4 * most >= 3 * len(shots):
            return best
    return np.full(len(shots), -1)


def main():
    answers = []
    for site in json.load(sys.stdin):
        names = [point[0] for point in site['points']]
        points = np.array([point[1:] for point in site['points']])
        shots = np.array([place(shot, site['ppm'], site['combinedFactor']) for shot in site['shots']])
        began = time.perf_counter()
        tree = cKDTree(points[:, :2])
        ready = time.perf_counter()
        found = identify(tree, points[:, :2], points[:, 2], shots)
        done = time.perf_counter()
        answers.append(
            {
                'laidOut': 1000 * (ready - began),
                'searched': 1000 * (done - ready),
                'names': [None if point < 0 else names[point] for point in found],
            }
        )
    json.dump(answers, sys.stdout)


main()
