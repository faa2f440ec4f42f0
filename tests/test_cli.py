"""The command line: exit statuses, what is printed where, what is written."""

from __future__ import annotations

import json
import os
import signal
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path
from typing import Any, NamedTuple

import pytest

import certgen
from certgen.cli import main

ROOT = Path(__file__).parent.parent
PAIRS = "(1 - 4*x)*y' = 2*y"


class Ran(NamedTuple):
    status: int
    out: str
    err: str

    @property
    def json(self) -> list[dict[str, Any]]:
        return [json.loads(line) for line in self.out.splitlines()]


Run = Callable[..., Ran]


@pytest.fixture
def run(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> Run:
    """Run the command line in an empty folder; whatever it prints is ASCII, no traceback."""
    monkeypatch.chdir(tmp_path)

    def call(*arguments: str) -> Ran:
        status = main(arguments)
        out, err = capsys.readouterr()
        assert (out + err).isascii()
        assert "Traceback" not in out + err
        return Ran(status, out, err)

    return call


def _files(folder: Path) -> dict[str, bytes]:
    return {path.name: path.read_bytes() for path in folder.iterdir()}


# --------------------------------------------------------------------------
# help


def test_the_version_is_that_of_the_package(run: Run) -> None:
    """`certgen --version` and `python -m certgen --version`."""
    assert run("--version") == (0, f"certgen {certgen.__version__}\n", "")
    done = _program("--version")
    assert (done.returncode, done.stdout) == (0, f"certgen {certgen.__version__}\n")


@pytest.mark.parametrize("command", ["certify", "check", "typeset"])
def test_every_help_ends_with_examples_and_statuses(run: Run, command: str) -> None:
    """Within 79 columns, with each option of the command."""
    ran = run(command, "--help")
    assert ran.status == 0
    assert all(len(line) <= 79 for line in ran.out.splitlines())
    assert ran.out.index("examples:") < ran.out.index("exit status:")
    assert all(f"\n  {status} " in ran.out for status in (0, 1, 2, 3, 4, 130))
    assert command in run("--help").out


@pytest.mark.parametrize(
    "arguments",
    [
        [], ["prove"], ["check"], ["certify"], ["typeset"], ["check", "--jobs", "0", "a"],
        ["check", "--jobs", "\u0663", "a"], ["check", "--arithmetic", "fast", "a"],
        ["certify", "--equation"], ["certify", "--equ", "y' = y"], ["certify", "a", "b\u00e4"],
        ["certify", "a.toml", "--equation", "y' = y"], ["certify", "a.toml", "--id", "a"],
    ],
)  # fmt: skip
def test_wrong_usage_is_status_2(run: Run, arguments: list[str]) -> None:
    """With help or a message, and without a traceback."""
    ran = run(*arguments)
    assert ran.status == 2
    assert ran.out or ran.err


# --------------------------------------------------------------------------
# certify


def test_certify_shows_what_was_read_and_writes_two_files(run: Run, tmp_path: Path) -> None:
    """Equation as read, canonical form, verdict, solution, degree, files."""
    ran = run("certify", "--equation", PAIRS, "--id", "pairs")
    assert (ran.status, ran.err) == (0, "")
    assert all(len(line) <= 79 for line in ran.out.splitlines())
    for label, text in (
        ("read as", "y'"),
        ("canonical", "(4*x - 1)*y' = (-2)*y"),
        ("claim", "every non-zero solution is algebraic"),
        ("verdict", "proved"),
        ("solution", "y = c * (4*x - 1)^(-1/2), c constant"),
        ("degree", "2"),
        ("written", "pairs.json"),
    ):
        assert any(line.startswith(f" {label:<14}") and text in line
                   for line in ran.out.splitlines()), label  # fmt: skip
    assert set(_files(tmp_path)) == {"pairs.json", "pairs.tex"}
    assert certgen.load("pairs.json").verdict == "proved"


def test_a_refuted_claim_is_status_1_and_stored(run: Run, tmp_path: Path) -> None:
    """The counter-prime and its reason stand in one line; r = x has a pole at infinity."""
    ran = run("certify", "--equation", "y' = x*y", "--id", "wrong")
    assert ran.status == 1
    assert " verdict       refuted" in ran.out
    assert " counter-prime " in ran.out
    assert certgen.load("wrong.json").verdict == "refuted"


def test_a_claim_of_transcendence_is_proved(run: Run) -> None:
    """The same equation, the other claim."""
    ran = run("certify", "--equation", "y' = x*y", "--asserts", "transcendental")
    assert ran.status == 0


def test_without_an_id_the_files_are_named_by_the_claim(run: Run, tmp_path: Path) -> None:
    """`eq-` and 8 hex digits, in the folder that --out names and makes."""
    assert run("certify", "--equation", PAIRS, "--out", "a/b").status == 0
    names = sorted(path.name for path in (tmp_path / "a" / "b").iterdir())
    assert len(names) == 2
    assert all(name.startswith("eq-") and len(name.split(".")[0]) == 11 for name in names)


def test_the_same_claim_again_is_unchanged(run: Run, tmp_path: Path) -> None:
    """Byte for byte; another claim of that id is refused, and --replace replaces it."""
    run("certify", "--equation", PAIRS, "--id", "a")
    before = _files(tmp_path)
    again = run("certify", "--equation", PAIRS, "--id", "a")
    assert again.out.count("unchanged") == 2
    other = run("certify", "--equation", "y' = 0", "--id", "a")
    assert other.status == 2
    assert "another claim" in other.err and "--replace" in other.err
    assert _files(tmp_path) == before
    assert run("certify", "--equation", "y' = 0", "--id", "a", "--replace").status == 0
    assert _files(tmp_path) != before


CLAIMS = """
[[claim]]
id = "one"
equation = "y' = y/(2*x)"
[[claim]]
id = "two"
equation = "y' = y"
asserts = "transcendental"
"""


def test_a_file_of_claims_is_certified_claim_by_claim(run: Run, tmp_path: Path) -> None:
    """One line of JSON for each, with the documented keys."""
    (tmp_path / "claims.toml").write_text(CLAIMS)
    ran = run("certify", "claims.toml", "--out", "out", "--json")
    assert ran.status == 0
    one, two = ran.json
    common = {"name", "state", "status", "id", "verdict", "equation", "as_written", "asserts",
              "subject", "proof", "digest", "arithmetic", "files"}  # fmt: skip
    assert set(one) == common | {"degree", "solution"}
    assert set(two) == common | {"counter_prime"}
    assert one["solution"] == [{"base": "x", "exponent": "1/2"}]
    assert [file["state"] for file in one["files"]] == ["written", "written"]
    assert all(Path(file["path"]).is_file() for file in one["files"] + two["files"])
    assert one["arithmetic"] == "both"


@pytest.mark.parametrize(
    "spoiled",
    [
        CLAIMS.replace("y/(2*x)", "y/0"),
        CLAIMS.replace('"two"', '"one"'),
        CLAIMS.replace('"two"', '"../two"'),
        CLAIMS.replace("asserts", "assert"),
        CLAIMS.replace("[[claim]]", "[[claim]", 1),
        "",
    ],
)
def test_a_file_with_an_unreadable_claim_writes_nothing(
    run: Run, tmp_path: Path, spoiled: str
) -> None:
    """The whole file is read before the first proof."""
    (tmp_path / "claims.toml").write_text(spoiled)
    ran = run("certify", "claims.toml")
    assert (ran.status, ran.out) == (2, "")
    assert ran.err.startswith("certgen: ")
    assert set(_files(tmp_path)) == {"claims.toml"}
    (line,) = run("certify", "claims.toml", "--json").json
    assert line["status"] == 2 and line["message"]


def test_one_claim_that_fails_does_not_stop_the_others(run: Run, tmp_path: Path) -> None:
    """The first name is taken by a file of somebody else; the second claim is certified."""
    (tmp_path / "claims.toml").write_text(CLAIMS)
    (tmp_path / "one.tex").write_text("% mine\n")
    ran = run("certify", "claims.toml")
    assert ran.status == 2
    assert "one.tex" in ran.err
    assert set(_files(tmp_path)) == {"claims.toml", "one.tex", "two.json", "two.tex"}
    assert (tmp_path / "one.tex").read_text() == "% mine\n"


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        (["--equation", "y' = "], ""),
        (["--equation", "y'' = y"], "order"),
        (["--equation", "y' = y/(x - x)"], "zero"),
        (["--equation", "y' = y", "--id", "A"], "id"),
        (["--equation", "y' = y", "--solution", "x"], ""),
        (["paper.tex"], "--equation"),
        (["none.toml"], "none.toml"),
        (["."], "folder"),
    ],
)
def test_unusable_input_is_one_message_on_standard_error(
    run: Run, tmp_path: Path, arguments: list[str], message: str
) -> None:
    """Status 2 (1 for the wrong closed form of y' = y), nothing on standard output."""
    ran = run("certify", *arguments)
    if "--solution" in arguments:
        assert ran.status == 1
        return
    assert (ran.status, ran.out) == (2, "")
    assert ran.err.startswith("certgen: ") and message in ran.err
    assert _files(tmp_path) == {}


def test_a_place_that_cannot_be_written_is_status_2(run: Run, tmp_path: Path) -> None:
    """A file where the folder should be; the verdict is shown all the same."""
    (tmp_path / "file").touch()
    ran = run("certify", "--equation", PAIRS, "--out", "file")
    assert ran.status == 2
    assert "proved" in ran.out
    assert "'file'" in ran.err


def test_a_certificate_that_the_checker_refuses_is_a_defect(
    run: Run, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Nothing is written, the message says whose fault it is, status 3."""
    import certgen.prover

    honest = certgen.prover.prove
    other = certgen.certify("y' = y/(2*x)").claim

    def wrong(claim: Any, progress: Any = None) -> Any:
        from dataclasses import replace

        return replace(honest(other, progress), claim=claim)

    monkeypatch.setattr(certgen.prover, "prove", wrong)
    ran = run("certify", "--equation", PAIRS)
    assert ran.status == 3
    assert "defect of certgen" in ran.err and "nothing was written" in ran.err
    assert _files(tmp_path) == {}


@pytest.mark.parametrize(
    ("error", "status", "message"),
    [
        (RuntimeError("sur\u00fcprise"), 3, "please report it"),
        (RecursionError("deep"), 3, "please report it"),
        (MemoryError(), 3, "memory"),
        (KeyboardInterrupt(), 130, "interrupted"),
    ],
)
def test_no_exception_becomes_a_traceback(
    run: Run, monkeypatch: pytest.MonkeyPatch,
    error: BaseException, status: int, message: str,
) -> None:  # fmt: skip
    """Whatever happens inside, the user gets one line; after Ctrl-C no verdict."""
    import certgen.prover

    def fail(*_: object) -> None:
        raise error

    monkeypatch.setattr(certgen.prover, "prove", fail)
    ran = run("certify", "--equation", PAIRS)
    assert ran.status == status
    assert message in ran.err
    assert "verdict" not in ran.out


@pytest.mark.needs_pdflatex
def test_a_pdf_is_made_on_request(run: Run, tmp_path: Path) -> None:
    """`certify --pdf` and `typeset --pdf` each make a document and leave nothing else."""
    assert run("certify", "--equation", PAIRS, "--id", "a", "--pdf").status == 0
    assert set(_files(tmp_path)) == {"a.json", "a.tex", "a.pdf"}
    assert (tmp_path / "a.pdf").read_bytes().startswith(b"%PDF")
    assert run("typeset", "a.json", "--pdf", "--out", "b").status == 0
    assert set(_files(tmp_path / "b")) == {"a.tex", "a.pdf"}


# --------------------------------------------------------------------------
# check


@pytest.fixture
def certificates(tmp_path: Path) -> Path:
    """Two good certificates, and what may lie beside them."""
    folder = tmp_path / "certificates"
    certgen.certify(PAIRS, id="pairs").save(folder)
    certgen.certify("y' = y", id="growth").save(folder)
    return folder


@pytest.mark.parametrize("arithmetic", ["plain", "flint", "both"])
def test_check_accepts_what_certify_wrote(
    run: Run, certificates: Path, arithmetic: str
) -> None:
    """An accepted certificate is status 0 whatever its verdict; the last line sums up."""
    ran = run("check", "certificates", "--arithmetic", arithmetic)
    assert (ran.status, ran.err) == (0, "")
    first, second, summary = ran.out.splitlines()
    assert first.split()[:4] == ["accepted", "refuted", "certificates/growth.json", "growth"]
    assert second.split()[:4] == ["accepted", "proved", "certificates/pairs.json", "pairs"]
    assert summary == "2 files: 2 accepted (1 proved, 1 refuted)"


def test_require_proved_makes_a_refutation_status_1(run: Run, certificates: Path) -> None:
    """The certificate is still accepted, and the summary says what is missing."""
    ran = run("check", "certificates", "--require", "proved")
    assert ran.status == 1
    assert ran.out.endswith("; 1 not proved as --require asks\n")
    assert run("check", "certificates/pairs.json", "--require", "proved").status == 0


def _forge(path: Path, **changes: str) -> None:
    """Change parts of the stored text, and recompute the digest as the format says."""
    import hashlib

    stored = json.loads(path.read_text())
    for key, value in changes.items():
        *way, last = key.split("__")
        part = stored
        for step in way:
            part = part[step]
        part[last] = value
    stored.pop("digest")
    compact = json.dumps(stored, sort_keys=True, ensure_ascii=True, separators=(",", ":"))
    stored["digest"] = hashlib.sha256(compact.encode()).hexdigest()
    path.write_text(json.dumps(stored, sort_keys=True, ensure_ascii=True, indent=1) + "\n")


def test_a_false_statement_is_status_1_with_all_its_parts(
    run: Run, certificates: Path
) -> None:
    """Degree 3 instead of 2, digest recomputed: code, path, expected and found."""
    _forge(certificates / "pairs.json", proof__degree="3")
    ran = run("check", "certificates", "--json")
    assert ran.status == 1
    good, bad = ran.json
    assert good["state"] == "accepted"
    assert bad["state"] == "rejected" and bad["status"] == 1
    assert bad["json_path"].startswith("$.proof")
    assert {"code", "expected", "found", "message"} <= set(bad)
    text = run("check", "certificates")
    assert "rejected" in text.out and bad["code"] in text.out
    assert text.out.endswith("2 files: 1 accepted (1 refuted), 1 rejected\n")


def test_the_text_as_written_is_compared(run: Run, certificates: Path) -> None:
    """The claim shown to the reader must be the claim that was proved."""
    _forge(certificates / "pairs.json", claim__as_written="y' = 3*y")
    ran = run("check", "certificates/pairs.json", "--json")
    assert ran.status == 1
    assert ran.json[0]["json_path"] == "$.claim.as_written"


def test_every_kind_of_bad_file_has_its_own_word_and_status(
    run: Run, certificates: Path, tmp_path: Path
) -> None:
    """Each alone, then all at once: the first of 2, 1, 4, 3 wins."""
    (certificates / "notes.json").write_text('{"a": 1}\n')
    _forge(certificates / "growth.json", format="certgen/2")
    _forge(certificates / "pairs.json", proof__degree="3")
    (tmp_path / "appendix.tex").touch()
    os.mkfifo(tmp_path / "pipe.json")
    for path, status, word in (
        ("certificates/notes.json", 2, "malformed"),
        ("certificates/growth.json", 4, "unsupported"),
        ("certificates/pairs.json", 1, "rejected"),
        ("none.json", 2, "unreadable"),
        ("pipe.json", 2, "unreadable"),
        ("appendix.tex", 2, "unreadable"),
    ):
        ran = run("check", path)
        assert (ran.status, ran.out.split()[0]) == (status, word)
        assert ran.out.splitlines()[-1] == f"1 file: 0 accepted, 1 {word}"
    assert "stored certificates" in run("check", "appendix.tex").out
    paths = ["certificates/pairs.json", "certificates/growth.json"]
    assert run("check", *paths).status == 1
    assert run("check", *paths, "none.json").status == 2


def test_a_folder_that_cannot_be_searched_is_said_in_its_place(
    run: Run, certificates: Path, tmp_path: Path
) -> None:
    """An empty folder is no success; what else was named is still checked."""
    (tmp_path / "empty").mkdir()
    ran = run("check", "certificates/pairs.json", "empty", "certificates/growth.json", "--json")
    assert ran.status == 2
    assert [line["state"] for line in ran.json] == ["accepted", "unreadable", "accepted"]


def test_links_to_folders_are_named_and_not_followed(
    run: Run, certificates: Path
) -> None:
    """Nothing is skipped silently."""
    (certificates / "loop").symlink_to(certificates)
    ran = run("check", "certificates")
    assert ran.status == 0
    assert "not followed" in ran.err and "loop" in ran.err


def test_many_files_are_checked_on_all_cores(run: Run, certificates: Path) -> None:
    """The same lines in the same order as on one core."""
    for number in range(12):
        certgen.certify(f"y' = y/({number + 2}*x)", id=f"n{number}").save(certificates)
    parallel = run("check", "certificates", "--jobs", "2")
    assert parallel == run("check", "certificates", "--jobs", "1")
    assert parallel == run("check", "certificates")
    assert "14 files: 14 accepted (13 proved, 1 refuted)" in parallel.out


# --------------------------------------------------------------------------
# typeset


def test_typeset_makes_the_same_appendix_as_certify(
    run: Run, certificates: Path, tmp_path: Path
) -> None:
    """One certificate: <id>.tex; several: certificates.tex."""
    assert run("typeset", "certificates/pairs.json", "--out", "new").status == 0
    assert _files(tmp_path / "new") == {"pairs.tex": (certificates / "pairs.tex").read_bytes()}
    ran = run("typeset", "certificates/pairs.json", "certificates/growth.json", "--json")
    assert ran.status == 0
    assert ran.json[0]["ids"] == ["pairs", "growth"]
    assert (tmp_path / "certificates.tex").is_file()


def test_nothing_is_typeset_unless_all_are_accepted(
    run: Run, certificates: Path, tmp_path: Path
) -> None:
    """A tampered one among two: status 1 and no file."""
    _forge(certificates / "pairs.json", proof__degree="3")
    ran = run("typeset", "certificates/growth.json", "certificates/pairs.json", "--out", "new")
    assert ran.status == 1
    assert "no appendix was written" in ran.err
    assert not (tmp_path / "new").exists()


def test_typeset_does_not_replace_a_manuscript(
    run: Run, certificates: Path, tmp_path: Path
) -> None:
    """A file of the author's under that name stays, unless --replace is said."""
    (tmp_path / "pairs.tex").write_text("\\documentclass{article}\n")
    assert run("typeset", "certificates/pairs.json").status == 2
    assert (tmp_path / "pairs.tex").read_text() == "\\documentclass{article}\n"
    assert run("typeset", "certificates/pairs.json", "--replace").status == 0


# --------------------------------------------------------------------------
# as a process


def _program(*arguments: str, **keywords: Any) -> subprocess.CompletedProcess[str]:
    keywords.setdefault("capture_output", True)
    return subprocess.run(
        [sys.executable, "-m", "certgen", *arguments],
        text=True, check=False, cwd=ROOT, **keywords,
    )  # fmt: skip


def test_a_full_standard_output_is_status_2(certificates: Path) -> None:
    """/dev/full refuses every byte: one message, no traceback, no verdict lost silently."""
    with open("/dev/full", "w") as full:
        done = _program("check", str(certificates), capture_output=False,
                        stdout=full, stderr=subprocess.PIPE)  # fmt: skip
    assert done.returncode == 2
    assert done.stderr == "certgen: cannot write the result: No space left on device\n"


def test_a_closed_pipe_is_quiet(certificates: Path) -> None:
    """`certgen check ... | head -0` ends without a word."""
    read, write = os.pipe()
    os.close(read)
    done = _program("check", str(certificates), capture_output=False,
                    stdout=write, stderr=subprocess.PIPE)  # fmt: skip
    os.close(write)
    assert (done.returncode, done.stderr) == (2, "")


def test_ctrl_c_is_130_without_a_verdict(tmp_path: Path) -> None:
    """Interrupted while it waits for many files on all cores."""
    script = (
        "import sys, time, certgen.batch, certgen.commands\n"
        "from certgen.cli import main\n"
        "def wait(*_, **__): print('in', flush=True); time.sleep(600)\n"
        "certgen.batch.check_file = wait\n"
        "sys.exit(main(['check', 'a.json']))\n"
    )
    with subprocess.Popen(
        [sys.executable, "-c", script],
        stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, cwd=ROOT,
    ) as process:  # fmt: skip
        assert process.stdout is not None
        assert process.stdout.readline() == "in\n"
        time.sleep(0.2)
        process.send_signal(signal.SIGINT)
        out, err = process.communicate(timeout=60)
    assert (process.returncode, out, err) == (130, "", "certgen: interrupted\n")
