"""environment.yml and pyproject.toml name the same packages with the same limits."""

import tomllib
from pathlib import Path

import yaml

ROOT = Path(__file__).parents[1]


def test_environment_and_project_agree():
    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    environment = yaml.safe_load((ROOT / "environment.yml").read_text(encoding="utf-8"))
    wanted = [f"python{project['requires-python']}", "pip", *project["dependencies"]]
    wanted += project["optional-dependencies"]["lab"]
    assert sorted(environment["dependencies"]) == sorted(name.lower() for name in wanted)
    assert environment["channels"] == ["conda-forge"]


def test_every_extra_that_needs_jupyterlab_asks_for_the_same():
    extras = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]["optional-dependencies"]
    assert set(extras["lab"]) <= set(extras["test"])
