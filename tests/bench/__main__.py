"""python -m tests.bench [--quick]: our times beside FLINT, sympy and PARI, one run.

Rows: prove, verify, refute, start, end to end.  Every comparison is a ratio of
two medians of this run; "goal" is the documented aim.
"""

from __future__ import annotations

import argparse
import platform
import shutil
import subprocess
import sys
import tempfile
from functools import partial
from pathlib import Path

import flint
import sympy

from certgen.checker.arithmetic import load
from certgen.checker.kernel import verify
from certgen.codec import write_certificate
from certgen.prover import prove
from certgen.prover.first_order import decide
from tests.bench.inputs import (
    Factors,
    algebraic_equation,
    claim,
    multiply_out,
    random_factors,
    transcendental_equation,
)
from tests.bench.measure import command, growth, python, seconds, seconds_in_child, show

MEMORY = """
from tests.bench.inputs import algebraic_equation, random_factors
from certgen.prover.first_order import decide
decide(algebraic_equation(random_factors({degree}, 1)))
"""

BARE = "from tests.bench.inputs import algebraic_equation, random_factors\n" \
       "import certgen.prover.first_order\n" \
       "algebraic_equation(random_factors({degree}, 1))"


def flint_factors_and_inverts(a: flint.fmpz_poly, b: flint.fmpz_poly) -> None:
    """Residues by factoring b over Z and inverting b' modulo each factor."""
    derivative = b.derivative()
    for f, _ in b.factor()[1]:
        g = flint.fmpq_poly(f)
        inverse = flint.fmpq_poly(derivative % f if f[f.degree()] == 1 else derivative) % g
        _, s, _ = g.xgcd(inverse)
        _ = (s * flint.fmpq_poly(a)) % g


def pari(a: flint.fmpz_poly, b: flint.fmpz_poly) -> float | None:
    """PARI factors b and computes the residue at each factor; None without gp."""
    if shutil.which("gp") is None:
        return None

    def text(f: flint.fmpz_poly) -> str:
        return "Pol([" + ",".join(str(c) for c in reversed(f.coeffs())) + "])"

    script = (
        f"default(parisizemax,4000000000)\na={text(a)};\nb={text(b)};\nt=getwalltime();"
        "f=factor(b)[,1];d=deriv(b);for(i=1,#f,lift(Mod(a,f[i])/Mod(d,f[i])));"
        "print(getwalltime()-t)\n"
    )
    out = subprocess.run(
        ["gp", "-q", "-f"], input=script, capture_output=True, text=True, timeout=900,
        check=True,
    )
    return max(int(out.stdout.split()[-1]), 1) / 1000


def sympy_apart(a: flint.fmpz_poly, b: flint.fmpz_poly) -> None:
    x = sympy.symbols("x")
    numerator = sympy.Poly([int(c) for c in reversed(a.coeffs())], x)
    denominator = sympy.Poly([int(c) for c in reversed(b.coeffs())], x)
    sympy.apart(numerator.as_expr() / denominator.as_expr(), x)


def algebraic_rows(degrees: list[int], limit: float) -> None:
    print("\nalgebraic side: prove and verify")
    print(f"{'d':>5} {'factors':>7} {'multiply':>9} {'prove':>9} {'ratio':>6} {'verify':>9}"
          f" {'ratio':>6} {'plain':>9} {'plain/flint':>11} {'FLINT factor':>12}"
          f" {'PARI':>9} {'sympy apart':>11}")
    curve = []
    for d in degrees:
        factors = random_factors(d, 1)
        equation = algebraic_equation(factors)
        times = measure_algebraic(factors, d, limit)
        multiply, proved, verified, plain, factoring, by_pari, by_sympy = times
        curve.append((d, proved))
        print(f"{d:>5} {len(factors):>7} {show(multiply):>9} {show(proved):>9}"
              f" {proved / multiply:>6.1f} {show(verified):>9} {verified / multiply:>6.1f}"
              f" {show(plain):>9} {'-' if plain is None else f'{plain / verified:.0f}':>11}"
              f" {show(factoring):>12} {show(by_pari):>9} {show(by_sympy):>11}", flush=True)
        del equation
    print(f"growth of prove from d = {curve[-3][0]} to {curve[-1][0]}: "
          f"d^{growth(curve[-3], curve[-1]):.2f}")


def measure_algebraic(factors: Factors, d: int, limit: float) -> tuple[float | None, ...]:
    """multiply, prove (decide), verify flint, verify plain, FLINT, PARI, sympy."""
    equation = algebraic_equation(factors)
    a = flint.fmpz_poly(list(equation.numerator.numerators))
    b = flint.fmpz_poly(list(equation.denominator.numerators))
    certificate = prove(claim(equation, f"bench-{d}", "algebraic"))
    fast, plain = load("flint"), load("plain")
    return (
        seconds(partial(multiply_out, factors)),
        seconds(partial(decide, equation)),
        seconds(partial(verify, fast, certificate)),
        seconds_in_child(partial(verify, plain, certificate), limit),
        seconds_in_child(partial(flint_factors_and_inverts, a, b), limit) if d <= 300 else None,
        pari(a, b) if d <= 300 else None,
        seconds_in_child(partial(sympy_apart, a, b), limit) if d <= 100 else None,
    )


def refutation_rows(degrees: list[int]) -> None:
    print("\nrefute: from the equation to the smallest counter-prime (5 seeds, worst)")
    print(f"{'d':>5} {'decide':>9} {'prove':>9} {'verify':>9} {'plain':>9}")
    for d in degrees:
        worst = [0.0] * 4
        for seed in range(5):
            equation = transcendental_equation(d, seed)
            certificate = prove(claim(equation, f"bench-{d}", "transcendental"))
            times = [
                seconds(partial(decide, equation), budget=0.3),
                seconds(partial(prove, certificate.claim), budget=0.3),
                seconds(partial(verify, load("flint"), certificate), budget=0.3),
                seconds(partial(verify, load("plain"), certificate), budget=0.3),
            ]
            worst = [max(x, y) for x, y in zip(worst, times, strict=True)]
        print(f"{d:>5} " + " ".join(f"{show(t):>9}" for t in worst), flush=True)


def process_rows(largest: int) -> None:
    print("\nstart and end to end (whole processes)")
    bare, bare_memory = command([sys.executable, "-c", "pass"], runs=9)
    print(f"{'bare Python':<42} {show(bare):>9} {bare_memory:6.0f} MiB")
    with tempfile.TemporaryDirectory() as folder:
        equation = algebraic_equation(random_factors(3, 1))
        small = Path(folder) / "bench.json"
        small.write_text(write_certificate(prove(claim(equation, "bench", "algebraic"))))
        run = [sys.executable, "-m", "certgen"]
        text = "2*(x^3-x)*y' = (3x^2-1)*y"
        rows = {
            "certgen --version": [*run, "--version"],
            "certgen check (one small certificate)": [*run, "check", str(small)],
            "certgen certify --equation ... (end to end)": [
                *run, "certify", "--equation", text, "--out", folder,
            ],
        }
        for name, arguments in rows.items():
            time, memory = command(arguments, runs=9)
            print(f"{name:<42} {show(time):>9} {memory:6.0f} MiB"
                  f"   {show(time - bare)} above bare Python")
    _, memory = python(MEMORY.format(degree=largest))
    _, before = python(BARE.format(degree=largest))
    print(f"peak memory of decide at d = {largest}: {memory:.0f} MiB"
          f" ({before:.0f} MiB with the input alone)")


def main() -> None:
    parser = argparse.ArgumentParser(prog="python -m tests.bench", description=__doc__)
    parser.add_argument("--quick", action="store_true", help="small degrees only")
    quick = parser.parse_args().quick
    print(f"Python {platform.python_version()}, python-flint {flint.__version__}, "
          f"sympy {sympy.__version__}, {platform.machine()}")
    degrees = [10, 30, 100] if quick else [10, 30, 100, 300, 1000, 3000]
    algebraic_rows(degrees, limit=10 if quick else 60)
    refutation_rows([3, 30, 100] if quick else [3, 30, 100, 300, 1000])
    process_rows(100 if quick else 3000)


if __name__ == "__main__":
    main()
