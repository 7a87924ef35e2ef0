"""Profiles of stars, ready to start a collapse: made from a scenario, written to files, read back."""

from massdash.profiles.columns import COLUMNS
from massdash.profiles.files import read_profile
from massdash.profiles.making import profile
from massdash.profiles.result import Profile

__all__ = ["COLUMNS", "Profile", "profile", "read_profile"]
