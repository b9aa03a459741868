"""SciPy solves the system that `halostep-tables adjust DIR --csv` writes, by another road: one dense covariance matrix
of the observations (common errors as covariances, not as extra unknowns), whitened by Cholesky, then
scipy.linalg.lstsq (LAPACK gelsd, singular values). Values and standard uncertainties must agree to 1e-8."""
import csv
import subprocess
import sys
import tempfile

import numpy as np
import scipy.linalg

TOLERANCE = 1e-8


def read_system(path):
    unknowns, observations, terms, common = [], [], [], {}
    with open(path, newline='', encoding='utf-8') as f:
        for r in csv.DictReader(f):
            if r['record'] == 'unknown':
                unknowns.append((r['name'], r['other'] == 'fixed', float(r['value']), float(r['u'])))
            elif r['record'] == 'observation':
                observations.append((float(r['value']), float(r['u']), int(r['group']), float(r['weight'])))
            elif r['record'] == 'term':
                terms.append((int(r['index']), int(r['other']), float(r['value'])))
            else:
                common[int(r['index'])] = float(r['u'])
    return unknowns, observations, terms, common


def solve(unknowns, observations, terms, common):
    """Values and u of all unknowns; fixed ones as they are."""
    free = [i for i, x in enumerate(unknowns) if not x[1]]
    column = {x: k for k, x in enumerate(free)}
    a = np.zeros((len(observations), len(free)))
    y = np.array([o[0] for o in observations])
    for o, x, factor in terms:
        if x in column:
            a[o, column[x]] += factor
        else:
            y[o] -= factor * unknowns[x][2]
    groups = {}
    for i, o in enumerate(observations):
        groups.setdefault(o[2] if o[2] >= 0 else ('alone', i), []).append(i)
    white, target = a.copy(), y.copy()
    for g, rows in groups.items():
        c = common.get(g, 0.0)
        v = np.full((len(rows), len(rows)), c * c)
        for k, i in enumerate(rows):
            _, u, _, weight = observations[i]
            v[k, k] = (u * u - c * c) / weight + c * c
        lower = np.linalg.cholesky(v)
        white[rows] = scipy.linalg.solve_triangular(lower, a[rows], lower=True)
        target[rows] = scipy.linalg.solve_triangular(lower, y[rows], lower=True)
    norm = np.linalg.norm(white, axis=0)  # columns scaled: the u span five powers of ten
    x, _, rank, _ = scipy.linalg.lstsq(white / norm, target, cond=1e-14)
    _, r = np.linalg.qr(white / norm)
    inverse = scipy.linalg.solve_triangular(r, np.eye(len(free)))
    u = np.sqrt((inverse ** 2).sum(axis=1)) / norm
    values = [z[2] for z in unknowns]
    us = [0.0] * len(unknowns)
    for k, i in enumerate(free):
        values[i], us[i] = x[k] / norm[k], u[k]
    return np.array(values), np.array(us), rank == len(free)


def compare(path, spoil=0.0):
    unknowns, *rest = read_system(path)
    values, us, full = solve(unknowns, *rest)
    ours = np.array([x[2] for x in unknowns])
    ours_u = np.array([x[3] for x in unknowns])
    ours[len(ours) // 2] += spoil
    off = np.abs(values - ours) / np.maximum(np.abs(values), 1.0)
    off_u = np.abs(us - ours_u) / np.maximum(us, 1e-300)
    off_u[us == 0] = np.abs(ours_u[us == 0])
    print(f'{len(unknowns)} species, {len(rest[0])} observations, rank {"full" if full else "LOST"}; largest relative '
          f'difference: values {off.max():.1e} ({unknowns[off.argmax()][0]}), u {off_u.max():.1e} '
          f'({unknowns[off_u.argmax()][0]})')
    return full and len(unknowns) > 500 and off.max() <= TOLERANCE and off_u.max() <= TOLERANCE


def main():
    tool, tables = sys.argv[1], sys.argv[2]
    with tempfile.NamedTemporaryFile(suffix='.csv') as out:
        subprocess.run([tool, 'adjust', tables, '--csv', out.name], check=True, stdout=subprocess.DEVNULL)
        ok = compare(out.name)
        caught = not compare(out.name, spoil=1e-4)
    if not caught:
        print('a value wrong by 1e-4 kJ/mol is not noticed')
    return 0 if ok and caught else 1


if __name__ == '__main__':
    sys.exit(main())
