"""The HTTP service, the command line and the Python client over `groups`."""
