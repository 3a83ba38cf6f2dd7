"""The README: what it shows is what the program does."""

import json
import os
import re
import shlex
import subprocess
import tempfile
import unittest

from support import ROOT, runnel, sample

README = (ROOT / "README.md").read_text()
BLOCKS = re.findall(r"^```(\w+)\n(.*?)^```", README, re.M | re.S)


def blocks(language):
    return [text for name, text in BLOCKS if name == language]


class Readme(unittest.TestCase):
    def test_the_plan_shown_is_the_sample(self):
        self.assertEqual(blocks("json")[0], sample("shelter").read_text())

    def test_the_results_shown_are_what_comes_out(self):
        account = runnel("takedown", sample("shelter")).stdout.decode()
        shown = blocks("text")
        self.assertTrue(shown)
        for block in shown:
            self.assertIn(block, account)

    def test_json_shown_is_json(self):
        for block in blocks("json"):
            json.loads(block)

    def test_the_commands_shown_run(self):
        lines = [shlex.split(line, comments=True) for block in blocks("sh") for line in block.splitlines()]
        calls = [words[1:] for words in lines if words and words[0] == "runnel"]
        self.assertGreater(len(calls), 3)
        with tempfile.TemporaryDirectory() as folder:
            stands_for = {"FOLDER": folder}
            for call in calls:
                done = runnel(*[stands_for.get(word, word) for word in call])
                self.assertEqual(done.returncode, 0, (call, done.stderr))

    def test_the_scripts_shown_exist(self):
        for script in re.findall(r"^(?:bash|sh) ([\w./]+)", "\n".join(blocks("sh")), re.M):
            self.assertTrue((ROOT / script).is_file(), script)

    def test_the_program_shown_prints_what_arrives(self):
        done = subprocess.run([os.environ["README_PROGRAM"], str(sample("shelter"))], stdout=subprocess.PIPE,
                              check=True, timeout=60)
        result = json.loads(runnel("takedown", sample("shelter"), "--format", "json").stdout)
        lines = done.stdout.decode().splitlines()
        self.assertEqual(len(lines), 2 * len(result["foundations"]))
        self.assertEqual(lines[0], "A1 dead 2.36 kN")

    def test_every_command_is_in_the_table(self):
        for command in ("check", "takedown", "regions", "frame", "explain", "compare", "schema"):
            self.assertIn(f"| `runnel {command} ", README)


if __name__ == "__main__":
    unittest.main(verbosity=1)
