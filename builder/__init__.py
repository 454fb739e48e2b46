"""Beadroll: reviewed records of NTC thermistors, checked, turned into curves and compared in kelvin."""
