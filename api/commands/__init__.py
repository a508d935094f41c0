"""What each command of the command line says; `api.cli` prints it."""
