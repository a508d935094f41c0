"""Hand-over: fits for flowsheets, ThermoML, and measurements against models."""
