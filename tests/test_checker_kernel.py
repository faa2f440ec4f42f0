"""The frame of the checker: from text to a CheckedCertificate, and no other way."""

from __future__ import annotations

import copy
import json
import pickle
import runpy
import subprocess
import sys
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import certgen
from certgen.checker import CheckedCertificate, check
from certgen.checker import __main__ as command
from certgen.checker.arithmetic import load
from certgen.checker.codes import CODES
from certgen.checker.plain import _ZPoly
from certgen.codec import BYTES_LIMIT, read_certificate
from certgen.errors import CertgenError, RejectedError, UnusableInputError
from certgen.notation import verify_as_written
from tests.handmade import NAMES, canonical, handmade, stored, with_digest
from tests.rejected import AS_WRITTEN_DIFFERS, TAMPERED, UNREADABLE, Tampered, Unreadable

HOME = Path(certgen.__file__).parents[1]
ARITHMETICS = pytest.mark.parametrize("arithmetic", ["plain", "flint", "both"])


def code_of(text: str | bytes, arithmetic: Any = "both") -> str:
    """The code with which the checker rejects, "" when it accepts."""
    try:
        check(text, arithmetic=arithmetic)
    except RejectedError as error:
        return error.code
    return ""


# --------------------------------------------------------------------------
# acceptance


@ARITHMETICS
@pytest.mark.parametrize("name", NAMES)
def test_true_certificates_are_accepted(name: str, arithmetic: Any) -> None:
    """Every certificate written by hand, under each arithmetic."""
    obj = with_digest(handmade(name))
    checked = check(canonical(obj), arithmetic=arithmetic)
    assert checked.arithmetic == arithmetic
    assert checked.digest == obj["digest"]
    assert checked.certificate.verdict == obj["verdict"]
    assert checked.certificate == read_certificate(canonical(obj)).certificate
    assert repr(checked) == f"<CheckedCertificate {name}: {obj['verdict']}>"


def test_the_default_arithmetic_is_flint_where_it_is_installed(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    """flint with python-flint, plain without."""
    text = stored(handmade("ferry"))
    assert check(text).arithmetic == "flint"
    monkeypatch.setattr("certgen.checker.kernel.find_spec", lambda name: None)
    assert check(text).arithmetic == "plain"
    for name in ("flint", "both"):
        with pytest.raises(UnusableInputError, match="not installed"):
            check(text, arithmetic=name)  # type: ignore[arg-type]


def test_an_unknown_arithmetic_is_a_mistake_of_the_caller() -> None:
    """Only three names are known."""
    with pytest.raises(ValueError, match="'plain' or 'flint'"):
        check(stored(handmade("ferry")), arithmetic="decimal")  # type: ignore[arg-type]


# --------------------------------------------------------------------------
# rejection: every code, under every arithmetic


@ARITHMETICS
@pytest.mark.parametrize("case", TAMPERED, ids=lambda case: case.name)
def test_each_lie_is_rejected_with_its_code(case: Tampered, arithmetic: Any) -> None:
    """Code and path are those of the lie; expected and found are there to read."""
    with pytest.raises(RejectedError) as caught:
        check(case.text, arithmetic=arithmetic)
    error = caught.value
    assert (error.code, error.path) == (case.code, case.path)
    assert error.expected and error.found
    assert str(error).isascii() and len(str(error)) < 400


def test_every_code_is_provoked() -> None:
    """The lies cover all codes; the two others have a test of their own below."""
    provoked = {case.code for case in TAMPERED}
    assert provoked | {"arithmetics-disagree", AS_WRITTEN_DIFFERS.code} == set(CODES)
    assert all(CODES.values())


def test_a_lie_has_no_second_fault() -> None:
    """Control: the names are unique and each lie differs from every true certificate."""
    assert len({case.name for case in TAMPERED}) == len(TAMPERED)
    true = {stored(handmade(name)) for name in NAMES}
    assert not true & {case.text for case in [*TAMPERED, AS_WRITTEN_DIFFERS]}


@pytest.mark.parametrize("wrong", ["plain", "flint"])
def test_two_arithmetics_that_differ_are_a_rejection(
    wrong: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    """An arithmetic that cannot multiply is found out by the other one."""
    text = stored(handmade("harbour-arches"))
    cls: Any = type(load(wrong).integer_polynomial([1]))
    right = cls.__mul__
    monkeypatch.setattr(cls, "__mul__", lambda f, g: right(f, g).times(2))
    with pytest.raises(RejectedError) as caught:
        check(text, arithmetic="both")
    assert caught.value.code == "arithmetics-disagree"
    assert "accepted" in f"{caught.value.expected} {caught.value.found}"
    assert code_of(text, wrong) not in ("", "arithmetics-disagree")


def test_two_arithmetics_that_accept_with_other_facts_disagree(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    """Both accept, but one would print another number: a rejection too."""
    monkeypatch.setattr(
        _ZPoly, "value", lambda f, x, right=_ZPoly.value: right(f, x) * (1 if x > 1 else 7)
    )
    monkeypatch.setattr("certgen.checker.describe.SPOT_POINTS", (-2,))
    assert code_of(stored(handmade("mixed-knots"))) == "arithmetics-disagree"


def test_the_author_s_text_is_compared_with_the_claim() -> None:
    """The notation reader finds a text that says something else; the checker does not look."""
    checked = check(AS_WRITTEN_DIFFERS.text, arithmetic="both")
    with pytest.raises(RejectedError) as caught:
        verify_as_written(checked.certificate.claim)
    error = caught.value
    assert (error.code, error.path) == (AS_WRITTEN_DIFFERS.code, AS_WRITTEN_DIFFERS.path)
    verify_as_written(check(stored(handmade("harbour-arches"))).certificate.claim)


@ARITHMETICS
def test_the_digest_comes_last_and_is_never_a_reason_to_accept(arithmetic: Any) -> None:
    """A wrong digest alone is `digest`; beside a lie the lie is named; right, it helps none."""
    obj = with_digest(handmade("harbour-arches"))
    assert code_of(canonical({**obj, "digest": "0" * 64}), arithmetic) == "digest"
    obj["verdict"] = "refuted"  # the digest is now that of another text
    assert code_of(canonical(obj), arithmetic) == "verdict"
    assert code_of(stored(obj), arithmetic) == "verdict"


def test_vacuous_values_come_before_everything_else() -> None:
    """A degree 0 is called vacuous even where the digest and the verdict are wrong too."""
    obj = with_digest(handmade("harbour-arches"))
    obj["verdict"], obj["proof"]["degree"] = "undecided", "0"
    assert code_of(canonical(obj)) == "vacuous"


# --------------------------------------------------------------------------
# only `check` makes one


def test_only_check_makes_a_checked_certificate() -> None:
    """The constructor wants a key that nobody has, and nothing can be changed."""
    checked = check(stored(handmade("ferry")))
    values = (checked.certificate, checked.digest, checked.arithmetic, checked.facts)
    for key in (None, object(), "certgen"):
        with pytest.raises(TypeError, match="only the checker"):
            CheckedCertificate(key, *values)
    for name in CheckedCertificate.__slots__:
        with pytest.raises(AttributeError, match="cannot be changed"):
            setattr(checked, name, None)
        with pytest.raises(AttributeError, match="cannot be changed"):
            delattr(checked, name)
    with pytest.raises(AttributeError):
        checked.more = 1  # type: ignore[attr-defined]


def test_a_checked_certificate_is_neither_copied_nor_pickled_into_being() -> None:
    """Copies and pickles do not lead around `check`."""
    checked = check(stored(handmade("ferry")))
    for attempt in (copy.copy, copy.deepcopy, lambda c: pickle.loads(pickle.dumps(c))):
        with pytest.raises((TypeError, AttributeError)):
            attempt(checked)


# --------------------------------------------------------------------------
# anything at all

PARTS = st.sampled_from(
    ["0", "1", "-1", "2", "3", "4", "5", "9", "91", "1/2", "-1/2", "2/3", "x", "x + 1",
     "x - 1", "x^2 + 1", "2*x", "x^3 - x", "x^2 - x - 1", "proved", "refuted", "algebraic",
     "transcendental", "(x)*y' = (1)*y", "(x^2 + 5*x)*y' = (1)*y", "999999999989"]
) | st.none() | st.just([]) | st.just({})  # fmt: skip


@given(st.sampled_from(NAMES), st.lists(st.tuples(st.randoms(), PARTS), max_size=3))
@settings(max_examples=400, deadline=None)
def test_changed_certificates_never_give_another_exception(name: str, changes: Any) -> None:
    """Up to three plausible values anywhere: accepted, or an error of the hierarchy."""
    obj = handmade(name)
    for random, value in changes:
        at: Any = obj
        while True:
            key = random.choice(sorted(at) if isinstance(at, dict) else range(len(at)))
            if not (isinstance(at[key], dict | list) and at[key] and random.random() < 0.9):
                break
            at = at[key]
        at[key] = copy.deepcopy(value)
    try:
        check(stored(obj), arithmetic="both")
    except CertgenError:
        return


# --------------------------------------------------------------------------
# the interpreter around it


def run(*arguments: str, options: tuple[str, ...] = ()) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, *options, *arguments],
        capture_output=True, text=True, cwd=HOME, check=False,
    )  # fmt: skip


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    """A true certificate, and one of each exit status."""
    texts = {
        "true.json": stored(handmade("ferry")),
        "false.json": next(t.text for t in TAMPERED if t.name == "verdict"),
        **{f"{u.status}.json": u.text for u in UNREADABLE},
    }
    for name, text in texts.items():
        (tmp_path / name).write_text(text)
    return tmp_path


@pytest.mark.parametrize("options", [(), ("-O",), ("-OO",), ("-I",), ("-X", "dev")])
def test_the_command_in_an_interpreter_of_its_own(folder: Path, options: Any) -> None:
    """0 accepted, 1 rejected, also where asserts are removed."""
    script = f"import sys; sys.path.insert(0, {str(HOME)!r}); " + (
        "from certgen.checker.__main__ import main; sys.exit(main(sys.argv[1:]))"
    )
    for name, status, word in (("true", 0, "accepted"), ("false", 1, "rejected")):
        for arithmetic in ("plain", "both"):
            done = run(
                "-c", script, "--arithmetic", arithmetic, str(folder / f"{name}.json"),
                options=options,
            )  # fmt: skip
            assert (done.returncode, done.stdout.split(":")[0]) == (status, word), done.stderr


def test_the_module_is_a_command(folder: Path) -> None:
    """`python -m certgen.checker FILE` prints claim, verdict and digest."""
    done = run("-m", "certgen.checker", str(folder / "true.json"))
    assert done.returncode == 0
    for piece in ("every non-zero solution", "(2*x^2 - 3*x + 1)*y'", "algebraic", "proved",
                  "plain", with_digest(handmade("ferry"))["digest"]):  # fmt: skip
        assert piece in done.stdout
    assert "as_written" in done.stderr
    done = run("-m", "certgen.checker", str(folder / "false.json"))
    assert done.returncode == 1
    assert "Traceback" not in done.stderr


def test_the_module_run_as_a_script(
    folder: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """Its status is that of `main`."""
    monkeypatch.setattr(sys, "argv", ["checker", str(folder / "false.json")])
    with pytest.raises(SystemExit) as caught:
        runpy.run_path(str(command.__file__), run_name="__main__")
    assert caught.value.code == 1
    assert capsys.readouterr().out.startswith("rejected")


@pytest.mark.parametrize(
    ("names", "status"),
    [
        (["true"], 0),
        (["true", "true"], 0),
        (["false"], 1),
        (["2"], 2),
        (["3"], 3),
        (["4"], 4),
        (["missing"], 2),
        (["true", "3"], 3),
        (["3", "4"], 4),
        (["4", "3", "false"], 1),
        (["3", "false", "2", "4"], 2),
    ],
)
def test_exit_statuses(
    folder: Path, names: list[str], status: int, capsys: pytest.CaptureFixture[str]
) -> None:
    """The first of 2, 1, 4, 3 that occurs; every file gets its line."""
    files = [str(folder / f"{name}.json") for name in names]
    assert command.main(files) == status
    out = capsys.readouterr().out
    assert all(file in out for file in files)


@pytest.mark.parametrize(
    ("arguments", "status"),
    [
        ([], 2),
        (["--help"], 0),
        (["-h"], 0),
        (["--arithmetic"], 2),
        (["--arithmetic", "decimal", "a.json"], 2),
        (["--arithmetic", "plain"], 2),
    ],
)
def test_usage(arguments: list[str], status: int, capsys: pytest.CaptureFixture[str]) -> None:
    """Help is status 0; arguments that are none get the usage and status 2."""
    with pytest.raises(SystemExit) as stop:
        command.main(arguments)
    assert stop.value.code == status
    captured = capsys.readouterr()
    shown = captured.out if status == 0 else captured.err
    assert shown.startswith("usage: python -m certgen.checker")
    assert status or "exit status:" in shown


def test_files_that_are_no_files(
    folder: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    """A folder, a file too large (seen before it is read) and a read that fails."""
    assert command.main([str(folder)]) == 2
    large = folder / "large.json"
    with large.open("wb") as file:
        file.truncate(BYTES_LIMIT + 1)
    assert command.main([str(large)]) == 3

    def fail(path: Path) -> bytes:
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(Path, "read_bytes", fail)
    assert command.main([str(folder / "true.json")]) == 2
    assert "Permission denied" in capsys.readouterr().out


def _modules(statement: str) -> set[str]:
    done = run("-c", f"{statement}\nimport sys, json; print(json.dumps(sorted(sys.modules)))")
    assert done.returncode == 0, done.stderr
    return set(json.loads(done.stdout.splitlines()[-1]))


CHECK = f"from certgen.checker import check; check({stored(handmade('three-currents'))!r}, "


def test_the_checker_needs_nothing_but_the_standard_library() -> None:
    """A whole plain check loads no third party; a flint check loads flint alone."""
    top = {name.split(".")[0] for name in _modules(CHECK + "arithmetic='plain')")}
    assert top & {"flint", "sympy", "jinja2", "pylatexenc", "mpmath", "markupsafe"} == set()
    loaded = _modules(CHECK + "arithmetic='both')")
    assert "flint" in loaded
    assert {name.split(".")[0] for name in loaded} & {"sympy", "jinja2", "pylatexenc"} == set()
    assert not any(name.startswith("certgen.prover") for name in loaded)


def test_plain_works_where_flint_is_not_installed() -> None:
    """With python-flint out of reach the default and plain still answer."""
    block = "import sys; sys.modules['flint'] = None\n"
    done = run("-c", f"{block}{CHECK}arithmetic='plain'); print('accepted')")
    assert done.stdout == "accepted\n", done.stderr
    done = run("-c", f"{block}{CHECK}arithmetic='flint')")
    assert "needs python-flint" in done.stderr


@pytest.mark.parametrize("arithmetic", ["plain", "flint", "both"])
def test_the_checker_does_not_depend_on_the_digits_setting(arithmetic: Any) -> None:
    """Huge integers in every place, under the smallest limit of the interpreter."""
    obj = handmade("still-water")
    obj["proof"]["eisenstein"]["constant"] = "3" * 5_000
    good = stored(obj)
    obj = handmade("harbour-arches")
    obj["proof"]["degree"] = "4" * 5_000
    bad = stored(obj)
    before = sys.get_int_max_str_digits()
    sys.set_int_max_str_digits(640)
    try:
        assert code_of(good, arithmetic) == ""
        assert code_of(bad, arithmetic) == "degree"
    finally:
        sys.set_int_max_str_digits(before)


@ARITHMETICS
@pytest.mark.parametrize("case", UNREADABLE, ids=lambda case: case.name)
def test_unreadable_texts_are_not_rejections(case: Unreadable, arithmetic: Any) -> None:
    """What cannot be read is neither accepted nor called false."""
    with pytest.raises(CertgenError) as caught:
        check(case.text, arithmetic=arithmetic)
    assert caught.value.status == case.status
    assert not isinstance(caught.value, RejectedError)
