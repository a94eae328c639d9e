"""What crosses? Vehicles, what a loading lets them do, and the train of shared axles that one part feels.

A share enters here, once and per axle; everything later multiplies by it and never asks for it again.
"""
