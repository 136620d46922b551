"""The walk-through of one night: every command of the page is run, in its order, in an empty folder."""

import os
import pathlib
import re
import subprocess

from conftest import ROOT

PAGE = ROOT / "deploy" / "docs" / "one-night.md"


def blocks():
    """The fenced blocks with their kind, in their order."""
    return re.findall(r"^```(\w+)\n(.*?)^```$", PAGE.read_text(encoding="utf-8"), re.M | re.S)


def test_every_command_of_the_page_runs(binary, tmp_path):
    known = {
        **os.environ,
        "PATH": f"{pathlib.Path(binary).parent}{os.pathsep}{os.environ['PATH']}",
    }
    known.pop("ENOLATTICE_DATA", None)
    # one shell for all blocks, as the reader has; each block ends with a mark
    commands = [text for kind, text in blocks() if kind == "sh"]
    mark = "== end of block"
    script = "set -eu\n" + "".join(f"{text}\necho '{mark}'\n" for text in commands)
    done = subprocess.run(
        ["bash", "-c", script], cwd=tmp_path, env=known, capture_output=True, text=True
    )
    assert done.returncode == 0, done.stderr
    printed = done.stdout.split(f"{mark}\n")
    assert len(printed) == len(commands) + 1

    # what the page shows of an output is in the output of the block before
    at = -1
    shown = 0
    for kind, text in blocks():
        if kind == "sh":
            at += 1
        else:
            for line in text.splitlines():
                assert line in printed[at].splitlines() or line in printed[at], line
                shown += 1
    assert shown >= 5

    made = {path.name for path in tmp_path.iterdir()}
    assert {"tonight", "tonight.html", "tonight.json", "cells.csv"} <= made
    cells = (tmp_path / "cells.csv").read_text(encoding="utf-8").splitlines()
    assert len(cells) == 1 + 192
    wells = (tmp_path / "tonight" / "wells.csv").read_text(encoding="utf-8").splitlines()
    assert len(wells) == 1 + 24
