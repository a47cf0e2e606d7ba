#!/usr/bin/env python3
"""What a competent numpy user would write: the yardstick of the benchmarks.

Self-consistent distortion of a ring by repeated numpy.linalg.eigh of the full
N x N matrix and linear mixing; chi0(q, T) for all q of the ring, vectorised.
t_i = t - alpha*b_i, b_i = u_{i+1} - u_i, sum b = 0; onsite g*q_i. One BLAS thread.

Run: plain.py WORK SITES  ->  "cpu_seconds result"
WORK: bond (polyacetylene set, half filled), site (spinless, incommensurate),
chi (site vertex, T = 0.02, filling 0.37; best of 3).
"""
import os
for v in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ[v] = "1"
import sys
import time
import numpy as np


def occupations(e, ne, gs):
    """fill ne electrons, gs per level; open shells are filled with equal fractions."""
    f = np.zeros_like(e); left = ne; i = 0
    while left > 1e-12:
        j = i
        while j < len(e) and e[j] - e[i] < 1e-9: j += 1
        cap = gs * (j - i); put = min(cap, left)
        f[i:j] = put / (j - i); left -= put; i = j
    return f


def hamiltonian(t_bond, eps):
    N = len(eps)
    H = np.diag(eps.astype(float))
    i = np.arange(N); j = (i + 1) % N
    H[i, j] -= t_bond; H[j, i] -= t_bond
    return H


def relax_site(N, ne, gs, t, g, Ks, q0, mix=0.7, tol=1e-9, maxit=500):
    q = q0.copy()
    for it in range(maxit):
        e, v = np.linalg.eigh(hamiltonian(np.full(N, t), g * q))
        f = occupations(e, ne, gs)
        n = (v**2) @ f
        qn = -g * (n - n.mean()) / Ks
        d = np.max(np.abs(qn - q))
        E = np.sum(f * e) + 0.5 * Ks * np.sum(q**2)
        if d < tol: break
        q = q + mix * (qn - q)
    return E


def relax_bond(N, ne, gs, t, alpha, K, b0, mix=0.7, tol=1e-9, maxit=500):
    b = b0 - b0.mean()
    for it in range(maxit):
        e, v = np.linalg.eigh(hamiltonian(t - alpha * b, np.zeros(N)))
        f = occupations(e, ne, gs)
        p = 2 * (v * np.roll(v, -1, axis=0)) @ f
        bn = -alpha * (p - p.mean()) / K
        d = np.max(np.abs(bn - b))
        E = np.sum(f * e) + 0.5 * K * np.sum(b**2)
        if d < tol: break
        b = b + mix * (bn - b)
    return E


def chi0_all_q(N, ne, gs, t, T):
    k = 2 * np.pi * np.arange(N) / N
    e = -2 * t * np.cos(k)
    lo, hi = -2 * t - 40 * T, 2 * t + 40 * T
    for _ in range(200):
        mu = 0.5 * (lo + hi)
        if np.sum(0.5 * (1 - np.tanh((e - mu) / (2 * T)))) > ne: hi = mu
        else: lo = mu
    f = 0.5 * (1 - np.tanh((e - mu) / (2 * T)))
    idx = (np.arange(N)[:, None] + np.arange(N)[None, :]) % N
    de = e[idx] - e[None, :]
    df = f[None, :] - f[idx]
    small = np.abs(de) < 1e-7
    fp = (f * (1 - f) / T)[None, :] * np.ones((N, 1))
    r = np.where(small, fp, df / np.where(small, 1.0, de))
    return gs * r.sum(axis=1) / N


if __name__ == "__main__":
    work, N = sys.argv[1], int(sys.argv[2])
    stagger = (-1.0)**np.arange(N)
    ne = int(round(0.37 * N))
    best = 1e9
    for _ in range(3 if work == "chi" else 1):
        t0 = time.process_time()
        if work == "bond":
            r = relax_bond(N, N, 2, 2.5, 4.1, 21.0, 0.1 * stagger) / N
        elif work == "site":
            ne += (ne + 1) % 2
            r = relax_site(N, ne, 1, 1.0, 1.0, 0.25, 0.5 * np.cos(2 * np.pi * ne / N * np.arange(N))) / N
        else:
            r = chi0_all_q(N, ne, 1, 1.0, 0.02).max()
        best = min(best, time.process_time() - t0)
    print("%.6f %.12f" % (best, r))
