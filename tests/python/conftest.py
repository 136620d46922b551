"""What the Python checks share: the binary, a live server, stubs made from the proto files.

Environment:

| variable | meaning |
| --- | --- |
| ENOLATTICE_BIN | the program `enolattice`; without it `target/release` and `target/debug` are tried |
| ENOLATTICE_CALIBRATION | the program `enolattice-calibration`; likewise |

A missing program is a failure, never a skip.
"""

import importlib
import os
import pathlib
import subprocess
import sys

import grpc
import pytest

ROOT = pathlib.Path(__file__).resolve().parents[2]


def program(name, variable):
    """Path of a program of this repository."""
    if variable in os.environ:
        candidates = [pathlib.Path(os.environ[variable])]
    else:
        candidates = [ROOT / "target" / profile / name for profile in ("release", "debug")]
    for path in candidates:
        if path.is_file():
            return str(path.resolve())
    raise FileNotFoundError(f"{name} is not built: build it, or set {variable}")


@pytest.fixture(scope="session")
def binary():
    return program("enolattice", "ENOLATTICE_BIN")


@pytest.fixture(scope="session")
def calibration():
    return program("enolattice-calibration", "ENOLATTICE_CALIBRATION")


class Server:
    """A server process with an empty data directory."""

    def __init__(self, binary, data):
        self.process = subprocess.Popen(
            [binary, "serve", "--listen", "127.0.0.1:0", "--data", str(data)],
            stdout=subprocess.PIPE,
            text=True,
        )
        line = self.process.stdout.readline().strip()
        words = "listening on "
        assert line.startswith(words), line
        self.address = line[len(words) :]
        self.channel = grpc.insecure_channel(self.address)

    def stop(self):
        """Stops as an operator does; gives the exit code."""
        self.channel.close()
        self.process.terminate()
        return self.process.wait(timeout=60)


@pytest.fixture(scope="session")
def server(binary, tmp_path_factory):
    server = Server(binary, tmp_path_factory.mktemp("data"))
    yield server
    assert server.stop() == 0


class Stubs:
    """Modules generated from the proto files, by the name of the file."""

    def __init__(self, folder):
        proto = ROOT / "proto"
        files = sorted((proto / "enolattice" / "v1").glob("*.proto"))
        subprocess.run(
            [sys.executable, "-m", "grpc_tools.protoc"]
            + [f"-I{proto}", f"-I{proto / 'third_party'}"]
            + [f"--python_out={folder}", f"--grpc_python_out={folder}"]
            + [str(file) for file in files],
            check=True,
        )
        sys.path.insert(0, str(folder))
        for file in files:
            module = importlib.import_module(f"enolattice.v1.{file.stem}_pb2")
            setattr(self, file.stem, module)
        for service in ("job_service", "chemistry_service", "plan_service", "report_service"):
            module = importlib.import_module(f"enolattice.v1.{service}_pb2_grpc")
            setattr(self, f"{service}_grpc", module)


@pytest.fixture(scope="session")
def stubs(tmp_path_factory):
    return Stubs(tmp_path_factory.mktemp("stubs"))
