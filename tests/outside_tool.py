"""Programs outside Python that tests compare with."""

import os
import shutil

import pytest


def needed(tool: str) -> str:
    """The path of a program; where it is missing, a failure under continuous integration and a skip elsewhere."""
    path = shutil.which(tool)
    if path is None:
        (pytest.fail if os.environ.get("CI") else pytest.skip)(f"{tool} is not installed; Debian has it as a package")
    return path
