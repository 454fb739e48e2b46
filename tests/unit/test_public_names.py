"""What `builder` offers to Python callers."""

import pkgutil
from importlib import import_module

import builder


def test_every_public_name_is_a_function_whatever_was_imported_before():
    for module in pkgutil.iter_modules(builder.__path__, "builder."):
        import_module(module.name)
    assert all(callable(getattr(builder, name)) for name in builder.__all__)
