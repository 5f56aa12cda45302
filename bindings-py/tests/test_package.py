"""The package itself: one version, and names that exist."""

import importlib.metadata

import ampwright


def test_the_module_and_the_package_agree_on_the_version():
    assert ampwright.__version__ == importlib.metadata.version("ampwright")


def test_every_name_offered_exists():
    for module in (ampwright, ampwright.arrays, ampwright.errors):
        assert all(hasattr(module, name) for name in module.__all__)
