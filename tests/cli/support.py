"""What the tests of the command line share: the executable, the samples, running and comparing."""

import json
import os
import pathlib
import subprocess

ROOT = pathlib.Path(__file__).resolve().parents[2]
RUNNEL = os.environ.get("RUNNEL", str(ROOT / ".build/release/runnel"))
EXPECTED = ROOT / "tests/cli/expected"
SAMPLES = sorted((ROOT / "samples").glob("*.json"))


def runnel(*arguments, text=None, env=None, stdout=subprocess.PIPE):
    """Runs the executable from the project's top; output as bytes."""
    return subprocess.run([RUNNEL, *map(str, arguments)], input=text, stdout=stdout, stderr=subprocess.PIPE,
                          cwd=ROOT, env={**os.environ, **(env or {})}, check=False, timeout=300)


def sample(name):
    return ROOT / "samples" / f"{name}.json"


def plan_of(name):
    return json.loads(sample(name).read_text())


def as_text(plan):
    return json.dumps(plan).encode()
