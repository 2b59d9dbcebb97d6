"""Insulating glass units: heat balance, solar factor and service life of any stack of panes."""

__version__ = "0.1.0"
