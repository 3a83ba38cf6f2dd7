"""The schemas against a general-purpose validator.

Usage: schema_check.py SOURCE_FOLDER BAD_PLANS_FOLDER

Each schema is itself valid JSON Schema 2020-12; samples are accepted; of the bad plans that test_problems
exports, exactly those are refused whose rows say so. Where the built program is at hand it is not needed: the
schemas are read from their files.
"""

import json
import pathlib
import sys

try:
    import jsonschema
except ImportError:
    print("python3-jsonschema is not installed: passed over")
    sys.exit(77)

SKIP_OF = {"plan/1": "plan", "frame/1": "frame", "frame-result/1": "frame", "result/1": "result"}


def load_validators(folder):
    validators = {}
    for path in sorted((folder / "lib/plan/schema").glob("*.json")):
        schema = json.loads(path.read_text(encoding="utf-8"))
        jsonschema.Draft202012Validator.check_schema(schema)
        validators[path.stem] = jsonschema.Draft202012Validator(schema)
    return validators


def first_error(validator, document):
    for error in validator.iter_errors(document):
        return "/" + "/".join(str(step) for step in error.absolute_path) + ": " + error.message[:300]
    return None


def check_samples(folder, validators, complain):
    count = 0
    for path in sorted((folder / "samples").glob("**/*.json")):
        document = json.loads(path.read_text(encoding="utf-8"))
        kind = SKIP_OF.get(document.get("runnel")) if isinstance(document, dict) else None
        if kind not in validators:
            continue
        count += 1
        error = first_error(validators[kind], document)
        if error:
            complain(f"sample {path.name} is refused: {error}")
    return count


def check_bad_plans(folder, validator, complain):
    error = first_error(validator, json.loads((folder / "valid.json").read_text(encoding="utf-8")))
    if error:
        complain(f"the valid plan is refused: {error}")
    rows = (folder / "list.tsv").read_text(encoding="utf-8").splitlines()
    for row in rows:
        name, expected, sentence = row.split("\t")
        error = first_error(validator, json.loads((folder / name).read_text(encoding="utf-8")))
        if expected == "rejects" and error is None:
            complain(f"accepted, but must be refused: {sentence} ({name})")
        if expected == "accepts" and error is not None:
            complain(f"refused, but its row says that the schema cannot tell: {sentence} ({name}): {error}")
    return len(rows)


def main():
    source, bad_plans = pathlib.Path(sys.argv[1]), pathlib.Path(sys.argv[2])
    complaints = []
    validators = load_validators(source)
    samples = check_samples(source, validators, complaints.append)
    rows = check_bad_plans(bad_plans, validators["plan"], complaints.append)
    print(f"{len(validators)} schemas, {samples} samples, {rows} bad plans")
    for complaint in complaints:
        print(complaint)
    return 1 if complaints or rows == 0 else 0


if __name__ == "__main__":
    sys.exit(main())
