"""Benchmarks: `python -m tests.bench` prints ours beside FLINT, sympy and PARI."""
