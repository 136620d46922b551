"""The scripts that hold the library's tables against other sources; each says what it compared."""

import pathlib
import subprocess
import sys

import pytest


@pytest.mark.parametrize("script", ["check_solvents.py", "check_reagents.py"])
def test_tables_agree_with_other_sources(script):
    path = pathlib.Path(__file__).with_name(script)
    done = subprocess.run([sys.executable, path], capture_output=True, text=True)
    assert done.returncode == 0, done.stdout + done.stderr
