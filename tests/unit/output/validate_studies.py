#!/usr/bin/env python3
"""Validates every study.json below FOLDER against SCHEMA, which must describe every key.

Usage: validate_studies.py SCHEMA FOLDER [PROGRAM]; PROGRAM, if given, is run with FOLDER first.
"""
import json
import pathlib
import shutil
import subprocess
import sys

import jsonschema


def undescribed(schema, path="#"):
    """Paths of properties without a description of their own or behind a reference."""
    found = []
    for key, part in schema.items():
        if key in ("properties", "$defs"):
            for name, property_schema in part.items():
                if not {"description", "$ref"} & property_schema.keys():
                    found.append(f"{path}/{name}")
                found += undescribed(property_schema, f"{path}/{name}")
        elif isinstance(part, dict):
            found += undescribed(part, f"{path}/{key}")
    return found


def main():
    schema = json.loads(pathlib.Path(sys.argv[1]).read_text(encoding="utf-8"))
    folder = pathlib.Path(sys.argv[2])
    if len(sys.argv) > 3:
        shutil.rmtree(folder, ignore_errors=True)
        subprocess.run([sys.argv[3], str(folder)], check=True)
    jsonschema.Draft202012Validator.check_schema(schema)
    validator = jsonschema.Draft202012Validator(schema)
    problems = [f"no description: {path}" for path in undescribed(schema)]
    files = sorted(folder.rglob("study.json"))
    for file in files:
        study = json.loads(file.read_text(encoding="utf-8"))
        problems += [f"{file}: {error.json_path}: {error.message}" for error in validator.iter_errors(study)]
        # Must be able to fail: without any one of its parts the study is wrong.
        for key in study:
            if validator.is_valid({name: value for name, value in study.items() if name != key}):
                problems.append(f"{file}: the schema does not ask for {key}")
    if not files:
        problems.append(f"no study.json below {folder}")
    print("\n".join(problems) or f"{len(files)} studies are valid")
    return 1 if problems else 0


if __name__ == "__main__":
    sys.exit(main())
