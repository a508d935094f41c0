"""The HTTP service, the command line and the Python client over `groups`."""

from importlib.metadata import version

__version__ = version("mixwright")
