"""The proto files against buf's rules, comments on everything among them."""

import shutil
import subprocess
import sys
import pathlib

from conftest import ROOT


def test_the_proto_files_pass_lint():
    beside_python = pathlib.Path(sys.executable).parent / "buf"
    buf = str(beside_python) if beside_python.is_file() else shutil.which("buf")
    assert buf, "buf is not installed: see requirements.txt"
    done = subprocess.run([buf, "lint", "proto"], cwd=ROOT, capture_output=True, text=True)
    assert done.returncode == 0, done.stdout + done.stderr
