"""The command line: its statuses, streams, formats and files."""

import csv
import io
import json
import os
import pathlib
import re
import subprocess
import tempfile
import unittest
import xml.etree.ElementTree as xml

import jsonschema

from support import EXPECTED, RUNNEL, SAMPLES, as_text, plan_of, runnel, sample

BAD_PLAN = {"runnel": "plan/1", "units": {"length": "m", "force": "kN"}, "cases": [], "levels": [], "colour": 1}


def shelter_without(what):
    plan = plan_of("shelter")
    del plan[what]
    return plan


class Statuses(unittest.TestCase):
    def status(self, expected, *arguments, **more):
        done = runnel(*arguments, **more)
        self.assertEqual(done.returncode, expected, (arguments, done.stderr))
        return done

    def test_what_is_done_ends_with_0(self):
        for plan in SAMPLES:
            self.status(0, "check", plan)
            self.status(0, "takedown", plan)

    def test_errors_in_the_plan_end_with_1(self):
        for command in ("check", "takedown", "regions"):
            done = self.status(1, command, "-", text=as_text(BAD_PLAN))
            if command == "takedown":
                self.assertEqual(done.stdout, b"")
                self.assertIn(b"unknown-key", done.stderr)

    def test_errors_found_after_reading_end_with_1_and_have_a_line(self):
        done = self.status(1, "takedown", "-", text=as_text(shelter_without("columns")))
        self.assertRegex(done.stderr, rb"error too-few-bearings  standard input:1:\d+")

    def test_wrong_usage_ends_with_2(self):
        plan = sample("shelter")
        for arguments in ([], ["--nonsense"], ["takedown"], ["takedown", plan, plan],
                          ["takedown", plan, "--format", "xml"], ["takedown", plan, "--units", "m"],
                          ["takedown", plan, "--units", "kN,m"], ["takedown", plan, "--threads", "0"],
                          ["takedown", plan, "--threads", "257"], ["takedown", plan, "--threads", "two"],
                          ["takedown", plan, "--share", "third"], ["takedown", plan, "--table", "members"],
                          ["takedown", plan, "--compare-shares", "--format", "csv"],
                          ["check", plan, "--compare-shares"], ["regions", plan, "--level", "cellar"], ["schema", "drawing"], ["check"],
                          ["check", "-", "-"], ["regions", sample("workshop"), "--format", "svg"]):
            done = self.status(2, *arguments, text=b"")
            self.assertEqual(done.stdout, b"", arguments)
            self.assertTrue(done.stderr.startswith(b"runnel: "), (arguments, done.stderr))

    def test_files_that_cannot_be_read_or_written_end_with_3(self):
        self.status(3, "check", "no-such-plan.json")
        self.status(3, "check", sample("shelter"), "no-such-plan.json")
        self.status(3, "takedown", "samples")
        self.status(3, "takedown", sample("shelter"), "-o", sample("workshop") / "folder")

    def test_a_full_disk_ends_with_3(self):
        for arguments in (["takedown", sample("shelter")], ["takedown", sample("workshop"), "--format", "json"],
                          ["check", sample("shelter")], ["schema", "plan"], ["--help"],
                          ["regions", sample("shelter")]):
            with open("/dev/full", "wb") as full:
                done = self.status(3, *arguments, stdout=full)
            self.assertIn(b"cannot write standard output", done.stderr)

    def test_a_closed_pipe_ends_with_3(self):
        read, write = os.pipe()
        os.close(read)
        with os.fdopen(write, "wb") as pipe:
            self.status(3, "takedown", sample("workshop"), "--format", "json", stdout=pipe)

    def test_help_and_version_are_everywhere(self):
        for command in ([], ["check"], ["takedown"], ["regions"], ["frame"], ["explain"], ["compare"], ["schema"]):
            self.assertIn(b"--help", self.status(0, *command, "--help").stdout)
            self.assertRegex(self.status(0, *command, "--version").stdout, rb"^runnel \d+\.\d+\.\d+\n$")

    def test_what_is_not_built_yet_says_so(self):
        for arguments in (["frame", "f.json"], ["explain", "p.json", "G1"], ["compare", "a.json", "b.json"]):
            done = self.status(2, *arguments)
            self.assertEqual(done.stdout, b"")
            self.assertIn(b"is not built yet", done.stderr)
            self.assertEqual(done.stderr.count(b"\n"), 1)

    def test_too_many_plans_are_refused_in_plain_words(self):
        done = self.status(2, "takedown", sample("shelter"), sample("workshop"))
        self.assertIn(b"one PLAN is wanted, and more are given", done.stderr)
        self.assertIn(b"--format wants one value", self.status(2, "takedown", sample("shelter"), "--format").stderr)

    def test_a_mistyped_word_gets_the_nearest(self):
        self.assertIn(b'did you mean "takedown"?', self.status(2, "takdown", sample("shelter")).stderr)
        self.assertIn(b"did you mean --format?", self.status(2, "takedown", sample("shelter"), "--fromat", "json").stderr)
        self.assertIn(b'did you mean "roof"?', self.status(2, "regions", sample("shelter"), "--level", "rof").stderr)


class OnePass(unittest.TestCase):
    """Mistakes of the text beside mistakes of the building."""

    def problems(self, plan, command="check", *more):
        done = runnel(command, "-", "--format", "json", *more, text=as_text(plan))
        self.assertEqual(done.returncode, 1, done.stderr)
        document = json.loads(done.stdout)
        self.assertNotIn("foundations", document)
        return document["problems"]

    def test_a_typo_does_not_hide_a_missing_column(self):
        plan = plan_of("shelter")
        plan["columns"].pop()
        plan["levels"][0]["colour"] = "red"
        for command in ("check", "takedown"):
            found = self.problems(plan, command)
            self.assertTrue({"unknown-key", "too-few-bearings"} <= {problem["code"] for problem in found})
            places = [(problem["line"], problem["column"]) for problem in found if problem["line"]]
            self.assertEqual(places, sorted(places))
        text = runnel("check", "-", text=as_text(plan)).stdout
        self.assertNotIn(b"are not checked until", text)

    def test_nor_does_a_missing_dead_case(self):
        plan = shelter_without("columns")
        plan["cases"] = plan["cases"][1:]
        codes = {problem["code"] for problem in self.problems(plan)}
        self.assertTrue({"no-dead-case", "too-few-bearings"} <= codes)

    def test_nor_does_a_wrong_load(self):
        for key, value, code in (("q", "much", "bad-quantity"), ("q", "3 m", "wrong-dimension"),
                                 ("q", True, "wrong-type"), ("case", "sno", "unknown-id")):
            plan = shelter_without("columns")
            plan["levels"][0]["area_loads"][0][key] = value
            plan["levels"][0]["point_loads"] = [{"case": "snow", "p": 1, "at": [90, 90]}]
            codes = {problem["code"] for problem in self.problems(plan)}
            self.assertTrue({code, "too-few-bearings", "load-off-decks"} <= codes, (value, codes))

    def test_what_is_not_supported_is_said_once(self):
        plan = plan_of("shelter")
        plan["levels"][0]["moving_point"] = {"case": "snow", "p": 1}
        self.assertEqual([problem["code"] for problem in self.problems(plan)], ["not-supported-yet"])
        plan = plan_of("shelter")
        plan["reductions"] = {"rule": "asce7"}
        self.assertEqual([problem["code"] for problem in self.problems(plan)], ["not-supported-yet"])

    def test_where_values_are_missing_framing_waits_and_says_so(self):
        plan = shelter_without("columns")
        plan["levels"][0]["joist_fields"][0]["spacing"] = "wide"
        line = b"Framing and loads are not checked until these are mended.\n"
        done = runnel("check", "-", text=as_text(plan))
        self.assertNotIn(b"too-few-bearings", done.stdout)
        self.assertTrue(done.stdout.endswith(line))
        self.assertTrue(runnel("takedown", "-", text=as_text(plan)).stderr.endswith(line))

    def test_errors_stand_before_notes_in_the_text(self):
        plan = plan_of("workshop")
        plan["columns"].pop()
        done = runnel("check", "-", text=as_text(plan)).stdout.decode()
        severities = re.findall(r"^(error|warning|note) ", done, re.M)
        self.assertEqual(severities, sorted(severities, key=["error", "warning", "note"].index))
        self.assertGreater(len(set(severities)), 1)


class Streams(unittest.TestCase):
    def test_standard_input_is_a_file_like_any_other(self):
        file = runnel("takedown", sample("workshop"), "--format", "json")
        piped = runnel("takedown", "-", "--format", "json", text=sample("workshop").read_bytes())
        self.assertEqual(file.stdout, piped.stdout)

    def test_the_same_input_gives_the_same_bytes_with_any_number_of_threads(self):
        for plan in SAMPLES:
            first = runnel("takedown", plan, "--format", "json").stdout
            for threads in ("1", "2", "7"):
                self.assertEqual(first, runnel("takedown", plan, "--format", "json", "--threads", threads).stdout)

    def test_problems_go_to_standard_error_or_into_the_document(self):
        text = runnel("takedown", sample("workshop"))
        self.assertIn(b"note continuous-as-drawn", text.stderr)
        document = runnel("takedown", sample("workshop"), "--format", "json")
        self.assertEqual(document.stderr, b"")
        codes = [problem["code"] for problem in json.loads(document.stdout)["problems"]]
        self.assertIn("continuous-as-drawn", codes)

    def test_a_document_of_a_plan_with_errors_holds_its_problems(self):
        done = runnel("takedown", "-", "--format", "json", text=as_text(BAD_PLAN))
        document = json.loads(done.stdout)
        self.assertEqual(done.returncode, 1)
        self.assertIn("unknown-key", [problem["code"] for problem in document["problems"]])
        self.assertNotIn("foundations", document)
        regions = json.loads(runnel("regions", "-", text=as_text(BAD_PLAN)).stdout)
        self.assertEqual(regions["levels"], [])
        self.assertIn("unknown-key", [problem["code"] for problem in regions["problems"]])

    def test_there_is_no_colour_but_on_a_terminal(self):
        for env in ({}, {"NO_COLOR": "1"}, {"NO_COLOR": ""}):
            done = runnel("takedown", sample("workshop"), env=env)
            self.assertNotIn(b"\x1b", done.stdout + done.stderr)

    def test_a_terminal_gets_colour_unless_no_color_is_set(self):
        self.assertIn(b"\x1b[", self.on_terminal({"TERM": "xterm"}))
        self.assertNotIn(b"\x1b[", self.on_terminal({"TERM": "xterm", "NO_COLOR": "1"}))

    @staticmethod
    def on_terminal(env):
        main, terminal = os.openpty()
        clean = {key: value for key, value in os.environ.items() if key != "NO_COLOR"}
        with subprocess.Popen([RUNNEL, "takedown", str(sample("shelter"))], stdout=terminal, stderr=terminal,
                              env={**clean, **env}) as process:
            os.close(terminal)
            seen = b""
            while True:
                try:
                    part = os.read(main, 65536)
                except OSError:  # the terminal's other end is closed
                    break
                if not part:
                    break
                seen += part
            process.wait()
        os.close(main)
        return seen


class Documents(unittest.TestCase):
    @classmethod
    def setUpClass(cls):
        cls.schemas = {name: json.loads(runnel("schema", name).stdout) for name in ("plan", "result", "frame")}

    def valid(self, document, schema):
        jsonschema.Draft202012Validator(self.schemas[schema]).validate(document)

    def test_schemas_are_schemas(self):
        for schema in self.schemas.values():
            jsonschema.Draft202012Validator.check_schema(schema)

    def test_samples_and_their_results_are_valid(self):
        for plan in SAMPLES:
            self.valid(json.loads(plan.read_text()), "plan")
            for more in ([], ["--units", "mm,N"], ["--units", "ft,kip"], ["--share", "lever"], ["--compare-shares"],
                         ["--compare-shares", "--share", "lever"]):
                self.valid(json.loads(runnel("takedown", plan, "--format", "json", *more).stdout), "result")

    def test_a_result_without_numbers_is_valid(self):
        self.valid(json.loads(runnel("takedown", "-", "--format", "json", text=b"{").stdout), "result")

    def test_problem_codes_stand_in_the_schema(self):
        codes = self.schemas["result"]["$defs"]["problem"]["properties"]["code"]["enum"]
        self.assertIn("strip-unsupported", codes)
        self.assertNotIn("@problem-codes@", codes)

    def test_check_lists_problems_with_their_file_where_several_are_given(self):
        one = json.loads(runnel("check", sample("workshop"), "--format", "json").stdout)
        self.assertTrue(one["problems"])
        self.assertNotIn("file", one["problems"][0])
        several = json.loads(runnel("check", sample("workshop"), sample("shelter"), "--format", "json").stdout)
        self.assertEqual({problem["file"] for problem in several["problems"]}, {str(sample("workshop"))})

    def test_the_shelter_by_hand(self):
        # 6 m x 4 m of 0.3 kN/m2 and 7 rafters of 4 m at 0.08 kN/m; four columns share alike.
        result = json.loads(runnel("takedown", sample("shelter"), "--format", "json").stdout)
        self.assertEqual(len(result["foundations"]), 4)
        for foundation in result["foundations"]:
            self.assertAlmostEqual(foundation["reactions"]["dead"], (24 * 0.3 + 28 * 0.08) / 4, places=12)
            self.assertAlmostEqual(foundation["reactions"]["snow"], 24 * 0.8 / 4, places=12)

    def test_units_of_the_output(self):
        si = json.loads(runnel("takedown", sample("shelter"), "--format", "json").stdout)
        us = json.loads(runnel("takedown", sample("shelter"), "--format", "json", "--units", "ft,lbf").stdout)
        self.assertEqual(us["units"], {"length": "ft", "force": "lbf"})
        kilonewtons = si["foundations"][0]["reactions"]["snow"]
        self.assertAlmostEqual(us["foundations"][0]["reactions"]["snow"], kilonewtons / 0.0044482216152605, places=9)
        self.assertAlmostEqual(us["levels"][0]["members"][0]["length"], 6 / 0.3048, places=12)

    def test_elevations_in_feet_come_back_as_given(self):
        plan = plan_of("five-storey")
        result = json.loads(runnel("takedown", sample("five-storey"), "--format", "json").stdout)
        self.assertEqual([level["elevation"] for level in result["levels"]],
                         [level["elevation"] for level in plan["levels"]])

    def test_ids_on_several_levels_are_written_with_their_level(self):
        result = json.loads(runnel("takedown", sample("five-storey"), "--format", "json").stdout)
        sources = {load["source"] for column in result["columns"] for lift in column["lifts"] for load in lift["from"]}
        self.assertIn("level3/RA", sources)
        self.assertNotIn("RA", sources)

    def test_share_is_overridden(self):
        plan = plan_of("shelter")
        result = json.loads(runnel("takedown", "-", "--format", "json", text=as_text(plan)).stdout)
        self.assertIn("share", result["settings"]["defaults"])
        result = json.loads(runnel("takedown", "-", "--format", "json", "--share", "half", text=as_text(plan)).stdout)
        self.assertEqual(result["settings"]["share"], "half")
        self.assertNotIn("share", result["settings"]["defaults"])
        self.assertEqual({deck["share"] for level in result["levels"] for deck in level["decks"]}, {"half"})

    def test_every_share_can_be_asked_for(self):
        forces = []
        for share in ("half", "lever", "continuous"):
            done = runnel("takedown", sample("shelter"), "--format", "json", "--share", share)
            self.assertEqual(done.returncode, 0, done.stderr)
            result = json.loads(done.stdout)
            self.assertEqual({deck["share"] for level in result["levels"] for deck in level["decks"]}, {share})
            forces.append([row["arrived"] for row in result["balance"]])
        for other in forces[1:]:
            for force, same in zip(forces[0], other, strict=True):
                self.assertAlmostEqual(force, same, places=6)

    def test_shares_are_compared_carrier_by_carrier_with_the_plan_s_own(self):
        arguments = ["takedown", sample("shelter"), "--compare-shares", "--format", "json"]
        result = json.loads(runnel(*arguments).stdout)
        self.assertEqual([run["share"] for run in result["shares"]], ["half", "lever", "continuous"])
        self.assertEqual([run["own"] for run in result["shares"]], [True, False, False])
        half = result["shares"][0]
        self.assertEqual({s["id"] for s in half["supports"]}, {"A1", "B1", "A2", "B2"})
        self.assertEqual(len(half["members"]), 9)
        for support in half["supports"]:
            self.assertAlmostEqual(support["total"]["snow"], 4.8)
        for run in result["shares"]:
            self.assertEqual(run["complete"], "supports" in run)
            self.assertEqual(run["complete"], not run["problems"])
        account = runnel(*arguments[:-2]).stdout.decode()
        self.assertIn("Shares compared, kN\n  %: difference from `half`, which this plan uses", account)

    def test_a_share_is_chosen_for_all_decks_and_named(self):
        plan = plan_of("shelter")
        plan["levels"][0]["decks"][0]["share"] = "lever"
        own = json.loads(runnel("takedown", "-", "--format", "json", text=as_text(plan)).stdout)
        self.assertEqual(own["settings"]["deck_shares"], [{"deck": "D", "share": "lever"}])
        chosen = json.loads(runnel("takedown", "-", "--format", "json", "--share", "continuous",
                                   text=as_text(plan)).stdout)
        self.assertEqual((chosen["settings"]["share"], chosen["settings"]["deck_shares"]), ("continuous", []))


class Texts(unittest.TestCase):
    def test_the_account_counts_all_problems(self):
        for plan in SAMPLES:
            done = runnel("takedown", plan)
            for severity in ("error", "warning", "note"):
                count = len(re.findall(rf"^{severity} ", done.stderr.decode(), re.M))
                self.assertRegex(done.stdout.decode(), rf"\b{count} {severity}s?\b")

    def test_the_account_fits_a_page_of_100_columns(self):
        for plan in SAMPLES:
            for units in ("m,kN", "mm,N", "in,lbf", "ft,kip", "cm,MN"):
                for line in runnel("takedown", plan, "--units", units).stdout.decode().split("\n"):
                    self.assertLessEqual(len(line), 100)

    def test_the_account_fits_with_hostile_ids(self):
        plan = plan_of("shelter")
        plan["title"] = "\u202ea title\nthat goes on \x1b[31m " + "and on " * 60
        names = {"roof": "roof " + "x" * 300, "A1": "=A1" * 90, "S": "\u5357" * 120, "snow": "snow on " * 40,
                 "J": "\u00e9" * 500, "dead": "d" * 200}

        def renamed(value, key=None):
            if isinstance(value, dict):
                return {k: renamed(v, k) for k, v in value.items()}
            if isinstance(value, list):
                return [renamed(v) for v in value]
            return names.get(value, value) if isinstance(value, str) and key not in ("kind", "title") else value

        plan = renamed(plan)
        plan["cases"] += [{"id": f"a rather long name of case number {i}", "kind": "other"} for i in range(40)]
        done = runnel("takedown", "-", text=as_text(plan))
        self.assertEqual(done.returncode, 0, done.stderr)
        account = done.stdout.decode()
        for line in account.split("\n"):
            self.assertLessEqual(len(line), 100, line)
            self.assertNotRegex(line, "[\x00-\x1f\x7f-\x9f\u202e]")
        self.assertIn("\u2026", account)

    def test_the_account_of_a_large_plan_is_short_and_says_so(self):
        plan = plan_of("shelter")
        width = 120
        plan["columns"] = [{"id": f"{row}{x}", "at": [x, y], "top": "roof"}
                           for row, y in (("A", 0), ("B", 4)) for x in range(0, width + 1, 2)]
        level = plan["levels"][0]
        level["members"] = [{"id": f"{row}{x}", "role": "beam", "from": [x, y], "to": [x + 2, y]}
                            for row, y in (("S", 0), ("N", 4)) for x in range(0, width, 2)]
        for ring in (level["decks"][0], level["joist_fields"][0]):
            ring["outline"] = [[0, 0], [width, 0], [width, 4], [0, 4]]
        done = runnel("takedown", "-", text=as_text(plan))
        self.assertEqual(done.returncode, 0, done.stderr)
        account = done.stdout.decode()
        self.assertRegex(account, r"and \d+ lighter members: all stand in")
        self.assertRegex(account, r"and \d+ lighter: all stand in the table `foundations`")
        self.assertLess(account.count("\n"), 200)

    def test_uplift_is_named_in_words(self):
        plan = plan_of("shelter")
        level = plan["levels"][0]
        level["joist_fields"] = []
        level["decks"] = []
        level["area_loads"] = []
        level["members"] = [{"id": "S", "role": "beam", "from": [0, 0], "to": [10, 0]}]
        level["point_loads"] = [{"case": "dead", "p": 30, "at": [10, 0], "on": "S"}]
        plan["columns"] = plan["columns"][:2]
        done = runnel("takedown", "-", text=as_text(plan))
        account = done.stdout.decode()
        self.assertIn("uplift of 20.0 kN: S lifts off A1", account)
        self.assertIn("-20.0 uplift", account)
        self.assertIn("at the foundation under A1", account)
        reactions = runnel("takedown", "-", "--format", "csv", text=as_text(plan)).stdout.decode()
        self.assertIn("uplift: dead", reactions)

    def test_accounts_are_as_expected(self):
        for plan in SAMPLES:
            expected = EXPECTED / f"{plan.stem}.txt"
            account = runnel("takedown", plan).stdout
            if os.environ.get("RUNNEL_REFRESH"):
                expected.write_bytes(account)
            self.assertEqual(account.decode(), expected.read_text(), f"{plan.stem}; see DEVELOPERS.md for refreshing")


class Tables(unittest.TestCase):
    def table(self, plan, name, **more):
        done = runnel("takedown", plan, "--format", "csv", "--table", name, **more)
        self.assertTrue(done.stdout.endswith(b"\r\n"))
        return list(csv.DictReader(io.StringIO(done.stdout.decode(), newline="")))

    def test_tables_say_the_same_as_the_document(self):
        for plan in SAMPLES:
            result = json.loads(runnel("takedown", plan, "--format", "json").stdout)
            members = [member for level in result["levels"] for member in level["members"]]
            self.assertEqual([row["member"] for row in self.table(plan, "members")], [m["id"] for m in members])
            self.assertEqual(len(self.table(plan, "reactions")), sum(len(m["bearings"]) for m in members))
            supports = result["columns"] + result["walls"]
            self.assertEqual(len(self.table(plan, "rundowns")), sum(len(s["lifts"]) for s in supports))
            force = result["units"]["force"]
            for row, foundation in zip(self.table(plan, "foundations"), result["foundations"], strict=True):
                self.assertEqual(row["under"], foundation["under"])
                for case, value in foundation["reactions"].items():
                    self.assertEqual(float(row[f"{case} ({force})"]), value)

    def test_texts_that_look_like_formulas_are_made_safe(self):
        plan = json.loads(json.dumps(plan_of("shelter")).replace('"A1"', '"=1+1,\\"x\\""').replace('"B1"', '"@B1"'))
        rows = self.table("-", "foundations", text=as_text(plan))
        self.assertEqual([row["under"] for row in rows][:2], ["'=1+1,\"x\"", "'@B1"])


class Folder(unittest.TestCase):
    def test_a_folder_gets_result_tables_and_drawings(self):
        with tempfile.TemporaryDirectory() as folder:
            target = pathlib.Path(folder) / "a/b"
            done = runnel("takedown", sample("workshop"), "-o", target)
            self.assertEqual(done.returncode, 0, done.stderr)
            self.assertEqual({path.name for path in target.iterdir()},
                             {"result.json", "members.csv", "reactions.csv", "rundowns.csv", "foundations.csv",
                              "plan-floor.svg", "plan-roof.svg"})
            self.assertEqual((target / "result.json").read_bytes(),
                             runnel("takedown", sample("workshop"), "--format", "json").stdout)
            self.assertEqual((target / "reactions.csv").read_bytes(),
                             runnel("takedown", sample("workshop"), "--format", "csv").stdout)

    def test_a_plan_with_errors_leaves_its_problems_and_nothing_of_earlier_runs(self):
        with tempfile.TemporaryDirectory() as folder:
            self.assertEqual(runnel("takedown", sample("shelter"), "-o", folder).returncode, 0)
            done = runnel("takedown", "-", "-o", folder, text=as_text(BAD_PLAN))
            self.assertEqual(done.returncode, 1)
            self.assertEqual([path.name for path in pathlib.Path(folder).iterdir()], ["result.json"])
            result = json.loads((pathlib.Path(folder) / "result.json").read_text())
            self.assertIn("unknown-key", [problem["code"] for problem in result["problems"]])
            self.assertNotIn("foundations", result)

    def test_only_files_of_its_own_are_removed(self):
        with tempfile.TemporaryDirectory() as name:
            folder = pathlib.Path(name)
            runnel("takedown", sample("workshop"), "-o", folder)
            others = {"plan-mine.svg": "<svg/>", "notes.txt": "keep", "members.csv.bak": "keep", "plan-floor.png": "keep"}
            for other, text in others.items():
                (folder / other).write_text(text)
            (folder / "plan-roof.svg.d").mkdir()
            done = runnel("takedown", sample("shelter"), "-o", folder)
            self.assertIn(b"result.json, members.csv, reactions.csv, rundowns.csv, foundations.csv, plan-roof.svg",
                          done.stderr)
            self.assertFalse((folder / "plan-floor.svg").exists())
            self.assertTrue((folder / "plan-roof.svg.d").is_dir())
            for other, text in others.items():
                self.assertEqual((folder / other).read_text(), text)

    def test_ids_make_safe_file_names_that_differ(self):
        plan = plan_of("shelter")
        roof = plan["levels"].pop()
        ids = ["..", "A b", "a_b", "A:b", "\u00e9"]
        for number, name in enumerate(ids):
            plan["levels"].append({**roof, "id": name, "elevation": 3.0 * (number + 1)})
        for column in plan["columns"]:
            column["top"] = ids[-1]
        with tempfile.TemporaryDirectory() as folder:
            done = runnel("takedown", "-", "-o", folder, text=as_text(plan))
            self.assertEqual(done.returncode, 0, done.stderr)
            names = {path.name for path in pathlib.Path(folder).glob("*.svg")}
            self.assertEqual(len({name.lower() for name in names}), len(ids))
            for name in names:
                self.assertRegex(name, r"^plan-[A-Za-z0-9._-]+\.svg$")


class Regions(unittest.TestCase):
    def test_regions_cover_the_decks(self):
        for plan in SAMPLES:
            result = json.loads(runnel("takedown", plan, "--format", "json").stdout)
            regions = json.loads(runnel("regions", plan).stdout)
            for level, alone in zip(result["levels"], regions["levels"], strict=True):
                self.assertEqual(level["regions"], alone["regions"])
                decks = sum(deck["area"] for deck in level["decks"])
                self.assertAlmostEqual(sum(region["area"] for region in alone["regions"]), decks, delta=1e-9 * decks)

    def test_one_level_alone(self):
        regions = json.loads(runnel("regions", sample("workshop"), "--level", "roof").stdout)
        self.assertEqual([level["id"] for level in regions["levels"]], ["roof"])

    def test_geojson_polygons_are_closed_and_keep_their_area(self):
        def area(ring):
            return sum(a[0] * b[1] - b[0] * a[1] for a, b in zip(ring, ring[1:])) / 2

        features = json.loads(runnel("regions", sample("workshop"), "--format", "geojson").stdout)["features"]
        self.assertTrue(features)
        for feature in features:
            total = 0
            for polygon in feature["geometry"]["coordinates"]:
                for ring in polygon:
                    self.assertEqual(ring[0], ring[-1])
                    total += area(ring)
                self.assertGreater(area(polygon[0]), 0)
            self.assertAlmostEqual(total, feature["properties"]["area"], places=9)

    def test_a_drawing_names_what_it_shows(self):
        svg = runnel("regions", sample("workshop"), "--level", "floor", "--format", "svg").stdout
        drawing = xml.fromstring(svg)
        space = "{http://www.w3.org/2000/svg}"
        result = json.loads(runnel("takedown", sample("workshop"), "--format", "json").stdout)
        level = result["levels"][0]
        regions = [(path.get("data-deck"), path.get("data-carrier"))
                   for path in drawing.iter(space + "path") if path.get("class") == "region"]
        self.assertEqual(regions, [(region["deck"], region["carrier"]) for region in level["regions"]])
        members = {line.get("data-id") for line in drawing.iter(space + "line")
                   if "member" in (line.get("class") or "").split()}
        self.assertEqual(members, {member["id"] for member in level["members"]})
        columns = {mark.get("data-id") for mark in drawing.iter() if mark.get("class") == "column"}
        self.assertEqual(columns, {column["id"] for column in result["columns"]})

    def test_a_drawing_with_hostile_ids_is_still_a_document(self):
        text = json.dumps(plan_of("shelter")).replace('"S"', '"<S>&\\"\'"').replace('"roof"', '"]]><roof"')
        done = runnel("regions", "-", "--format", "svg", text=text.encode())
        self.assertEqual(done.returncode, 0, done.stderr)
        xml.fromstring(done.stdout)


if __name__ == "__main__":
    unittest.main(verbosity=1)
