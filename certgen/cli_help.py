"""The wording of `certgen --help`: by example."""

from __future__ import annotations

__all__ = ["CERTIFY", "CHECK", "MAIN", "TYPESET"]

_END = """\
  2    unusable input: malformed, missing, unwritable
  3    no verdict: a limit was reached (the specification lists them), or a
       defect of certgen was found
  4    a format or kind that this version does not know
  130  interrupted
  With several inputs: the first of 2, 1, 4, 3 that occurs.
"""

_CERTIFY_STATUSES = f"""\
exit status:
  0    every claim is proved
  1    a claim is refuted
{_END}"""

_CHECK_STATUSES = f"""\
exit status:
  0    every certificate is accepted, that of a refuted claim too
  1    a certificate is rejected (or its verdict is not the one of --require)
{_END}"""

_TYPESET_STATUSES = f"""\
exit status:
  0    every certificate is accepted, and the appendix is written
  1    a certificate is rejected
{_END}"""

_STATUSES = f"""\
exit status:
  0    every claim proved (certify), every certificate accepted (check, typeset)
  1    a claim refuted (certify), a certificate rejected (check, typeset)
{_END}"""

MAIN = f"""\
From a claim to an appendix that a referee can check:

  certgen certify --equation "(1 - 4*x)*y' = 2*y" --id lanterns
      decides whether the non-zero solutions are algebraic and writes
      lanterns.json (the certificate) and lanterns.tex (the appendix)
  certgen check lanterns.json
      checks the certificate again, years later, without the prover
  certgen typeset lanterns.json --pdf
      makes the appendix again from the certificate

Each command has its own help: certgen certify --help

{_STATUSES}"""

CERTIFY = f"""\
examples:
  certgen certify --equation "y' = (3*x^2 - 1)/(2*(x^3 - x)) * y"
      Every non-zero solution is algebraic: proved, with the solution, its
      degree and the files eq-<8 digits>.json and .tex.

  certgen certify --equation '(1-27t)\\,u'"'"'(t) = 9\\,u(t)' --id cubic \\
                  --solution '\\frac{{1}}{{\\sqrt[3]{{1-27t}}}}' --out proofs
      LaTeX as it stands in the paper, with the closed form that is claimed.

  certgen certify --equation "y' = 2*x*y" --asserts transcendental
      Proved by a counter-prime, which can be checked by hand.

  certgen certify claims.toml --out proofs --json
      All claims of a file; one line of JSON for each.

  An equation that begins with a minus sign is given as --equation="-y'=...".

a file of claims:
  [[claim]]
  id = "cubic"
  title = "Lanterns hung in threes"
  equation = "(1 - 27*t)*u' = 9*u"
  solution = "(1 - 27*t)^(-1/3)"
  Keys: id, equation, asserts, subject, solution, title, note; each is also an
  option. Where a claim in the file cannot be read, nothing is written.

JSON keys:
  name, state, status, id, verdict, equation, as_written, asserts, subject,
  proof, digest, arithmetic; degree and solution, or counter_prime; files (a
  list of path and state). Where no certificate was made: name, state, status,
  message.

{_CERTIFY_STATUSES}"""

CHECK = f"""\
examples:
  certgen check lanterns.json
  certgen check proofs/
      Every .json file below the folder, on all cores; a .json file that is not
      a certificate is malformed (status 2).
  certgen check proofs/ --arithmetic both --require proved
      With both arithmetics, which must agree; a certificate that refutes its
      claim counts as status 1.
  python -m certgen.checker lanterns.json
      The checker by itself, without reading the author's notation.

JSON keys:
  name, state (accepted, rejected, malformed, unreadable, unsupported, limit,
  defect), status; if accepted: id, verdict, equation, as_written, asserts,
  subject, proof, digest, arithmetic, degree and solution, or counter_prime;
  otherwise message; if rejected: also code, json_path, expected, found.

{_CHECK_STATUSES}"""

TYPESET = f"""\
examples:
  certgen typeset lanterns.json
      Writes lanterns.tex, to be used with \\input{{lanterns}} in a paper that
      loads amsmath.
  certgen typeset lanterns.json ferry.json --out paper --pdf
      One appendix for both, with a table: paper/certificates.tex, and a
      document of its own: paper/certificates.pdf.

  Every certificate is checked first, with both arithmetics; nothing is written
  unless all are accepted.

{_TYPESET_STATUSES}"""
