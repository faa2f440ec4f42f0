r"""From a checked certificate to the appendix of a paper.

Only a `CheckedCertificate` is ever typeset, and there is no way around that.  A
fragment is plain ASCII for `\input` into any article class with amsmath; it
holds no dates, paths or names of machines, and is the same for the same
certificate.
"""

from __future__ import annotations

import re
from collections.abc import Sequence

from certgen.appendix.algebraic import build_algebraic
from certgen.appendix.closed_form import build_closed_form
from certgen.appendix.document import build_pdf, standalone
from certgen.appendix.environment import render
from certgen.appendix.readback import printed_formulas
from certgen.appendix.refutation import build_refutation
from certgen.appendix.summary import build_summary, latex_summary
from certgen.certificate import AlgebraicSolution, ClosedFormDisagrees
from certgen.checker import CheckedCertificate
from certgen.errors import ClaimError
from certgen.notation import verify_as_written
from certgen.notation.latex_writer import wrap_source

__all__ = [
    "build_pdf",
    "latex_summary",
    "printed_formulas",
    "standalone",
    "typeset",
    "typeset_many",
]


def typeset(checked: CheckedCertificate) -> str:
    r"""Return the appendix of one certificate, a fragment for `\input`.

    The author's text of the claim is read again first.  Raises TypeError for
    anything but a CheckedCertificate, RejectedError when the text says something
    else than the claim.
    """
    body = _body(checked)
    return _finish(checked.certificate.claim.id, [body])


def typeset_many(checked: Sequence[CheckedCertificate]) -> str:
    """Return one appendix for several certificates, with a summary table first.

    Raises ClaimError for no certificate at all or an id that stands twice, and
    otherwise as `typeset`.
    """
    bodies = [_body(item) for item in checked]
    ids = [item.certificate.claim.id for item in checked]
    if not ids or len(ids) != len(set(ids)):
        raise ClaimError("an appendix needs certificates with different ids, at least one")
    table = render("many.tex.j2", summary=build_summary(checked))
    return _finish("several certificates", [table, *bodies])


def _finish(name: str, bodies: Sequence[str]) -> str:
    """The macros and the bodies, in short lines and without runs of blank lines."""
    text = "\n".join([render("macros.tex.j2"), *bodies])
    text = "\n".join(line.rstrip() for line in text.splitlines())
    text = re.sub(r"\n{3,}", "\n\n", text).strip("\n")
    return f"% certgen: {name}\n{wrap_source(text)}\n"


def _body(checked: CheckedCertificate) -> str:
    if not isinstance(checked, CheckedCertificate):
        raise TypeError(
            f"only a CheckedCertificate can be typeset, not a {type(checked).__name__}"
        )
    verify_as_written(checked.certificate.claim)
    proof = checked.certificate.proof
    if isinstance(proof, AlgebraicSolution):
        return _algebraic(checked)
    if isinstance(proof, ClosedFormDisagrees):
        return _closed_form(checked)
    return _refutation(checked)


def _algebraic(checked: CheckedCertificate) -> str:
    head, steps = build_algebraic(checked)
    return render(
        "algebraic_solution.tex.j2",
        head=head, sym=head.sym, steps=steps,
        show_claimed=head.claimed is not None,
        cited=_cited_by_steps(steps.integrality is not None and not steps.zero),
    )  # fmt: skip


def _closed_form(checked: CheckedCertificate) -> str:
    head, form, steps = build_closed_form(checked)
    return render(
        "closed_form_disagrees.tex.j2",
        head=head, sym=head.sym, steps=steps, form=form, show_claimed=False,
        cited=_cited_by_steps(steps.integrality is not None and not steps.zero),
    )  # fmt: skip


def _refutation(checked: CheckedCertificate) -> str:
    head, refutation = build_refutation(checked)
    cited: tuple[str, ...] = ("cartier", "honda", "katz", "katz-conjecture")
    if not refutation.density.almost_all:
        cited = ("cartier", "chebotarev", "honda", "katz", "katz-conjecture", "kronecker")
    return render(
        "no_algebraic_solution.tex.j2",
        head=head, sym=head.sym, no=refutation, cp=refutation.counter_prime,
        p=refutation.counter_prime.p, cited=cited,
    )  # fmt: skip


def _cited_by_steps(has_eisenstein: bool) -> tuple[str, ...]:
    return ("eisenstein", "heine") if has_eisenstein else ()
