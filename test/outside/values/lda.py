"""Checks lda.json, and says how its values were made: python3 lda.py

exact    batch variational inference (Hoffman, Blei & Bach 2010) in 30-digit arithmetic by mpmath
sklearn  the same steps by scikit-learn 1.2.1, whose digamma is good to 3e-9; checked where installed
evidence log p(words) by enumeration over assignments (Griffiths & Steyvers 2004, equations 2 and 3)
"""

import itertools
import json
import math
import mpmath as mp

mp.mp.dps = 30


def e_step(counts, alpha, lam, limit, tolerance):
    """gamma from flat starts, and the expected counts of the M-step."""
    themes, words = len(lam), len(lam[0])
    expected = []
    for row in lam:
        total = mp.digamma(sum(row))
        expected.append([mp.exp(mp.digamma(v) - total) for v in row])
    gammas, statistics = [], [[mp.mpf(0)] * words for _ in range(themes)]
    for row in counts:
        told = [(w, int(c)) for w, c in enumerate(row) if c > 0]
        gamma = [mp.mpf(1)] * themes
        for _ in range(limit):
            t = [mp.exp(mp.digamma(v)) for v in gamma]
            norms = [sum(t[k] * expected[k][w] for k in range(themes)) for w, _ in told]
            last, gamma = gamma, [alpha + t[k] * sum(c / n * expected[k][w] for (w, c), n in zip(told, norms))
                                  for k in range(themes)]
            if sum(abs(a - b) for a, b in zip(last, gamma)) / themes < tolerance:
                break
        gammas.append(gamma)
        t = [mp.exp(mp.digamma(v)) for v in gamma]
        for w, c in told:
            norm = sum(t[k] * expected[k][w] for k in range(themes))
            for k in range(themes):
                statistics[k][w] += t[k] * c / norm * expected[k][w]
    return gammas, statistics


def bound(counts, alpha, eta, gammas, lam):
    def logs(rows):
        return [[mp.digamma(v) - mp.digamma(sum(row)) for v in row] for row in rows]

    def minus_divergence(prior, rows):
        total = mp.mpf(0)
        for row, expected in zip(rows, logs(rows)):
            total += sum((prior - v) * x + mp.loggamma(v) for v, x in zip(row, expected))
            total += mp.loggamma(prior * len(row)) - len(row) * mp.loggamma(prior) - mp.loggamma(sum(row))
        return total

    theta, phi = logs(gammas), logs(lam)
    words = sum(int(c) * mp.log(sum(mp.exp(theta[d][k] + phi[k][w]) for k in range(len(lam))))
                for d, row in enumerate(counts) for w, c in enumerate(row) if c > 0)
    return words + minus_divergence(alpha, gammas) + minus_divergence(eta, lam)


def evidence(counts, alpha, eta, themes):
    words = len(counts[0])
    tokens = [(d, w) for d, row in enumerate(counts) for w, c in enumerate(row) for _ in range(int(c))]

    def rows(table, prior):
        return sum(math.lgamma(prior * len(row)) - math.lgamma(prior * len(row) + sum(row))
                   + sum(math.lgamma(prior + n) - math.lgamma(prior) for n in row) for row in table)

    terms = []
    for assigned in itertools.product(range(themes), repeat=len(tokens)):
        passages = [[0] * themes for _ in counts]
        distributions = [[0] * words for _ in range(themes)]
        for (d, w), k in zip(tokens, assigned):
            passages[d][k] += 1
            distributions[k][w] += 1
        terms.append(rows(passages, alpha) + rows(distributions, eta))
    most = max(terms)
    return most + math.log(sum(math.exp(term - most) for term in terms))


def furthest(a, b):
    return max(abs(x - y) for p, q in zip(a, b) for x, y in zip(p, q))


def main():
    with open('lda.json') as file:
        given = json.load(file)
    for name, case in given['cases'].items():
        alpha, eta = mp.mpf(repr(case['alpha'])), mp.mpf(repr(case['eta']))
        lam = [[mp.mpf(repr(v)) for v in row] for row in case['lambdaStart']]
        tolerance = case['innerTolerance'] if case['innerTolerance'] > 1e-6 else 1e-16
        for step in range(6):
            gammas, statistics = e_step(case['counts'], alpha, lam, case['innerLimit'], tolerance)
            if str(step) in case['after']:
                exact = case['after'][str(step)]['exact']
                print(name, step, furthest(lam, exact['lam']), furthest(gammas, exact['gamma']),
                      abs(bound(case['counts'], alpha, eta, gammas, lam) - exact['elbo']))
            lam = [[eta + v for v in row] for row in statistics]
    for case in given['evidence'] + given['byHand']:
        found = evidence(case['counts'], case['alpha'], case['eta'], case['themes'])
        print('evidence', case['alpha'], case['eta'], abs(found - case['logEvidence']))
    try:
        import numpy as np
        from sklearn.decomposition import LatentDirichletAllocation
        from sklearn.decomposition._lda import _dirichlet_expectation_2d
    except ImportError:
        print('scikit-learn: not installed')
        return
    for name, case in given['cases'].items():
        counts, lam = np.array(case['counts']), np.array(case['lambdaStart'])
        model = LatentDirichletAllocation(case['themes'], doc_topic_prior=case['alpha'],
                                          topic_word_prior=case['eta'], learning_method='batch',
                                          max_doc_update_iter=case['innerLimit'],
                                          mean_change_tol=case['innerTolerance'])
        model._init_latent_vars(counts.shape[1], dtype=np.float64)
        for step in range(51):
            model.components_ = lam
            model.exp_dirichlet_component_ = np.exp(_dirichlet_expectation_2d(lam))
            gamma, statistics = model._e_step(counts, cal_sstats=True, random_init=False)
            if str(step) in case['after']:
                kept = case['after'][str(step)]['sklearn']
                print('scikit-learn', name, step, abs(lam - kept['lam']).max(), abs(gamma - kept['gamma']).max(),
                      abs(model._approx_bound(counts, gamma, sub_sampling=False) - kept['bound']))
            lam = case['eta'] + statistics


if __name__ == '__main__':
    main()
