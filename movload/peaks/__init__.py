"""Where is it worst? Exact extremes over all positions, and the placement that gives each.

Never a sample: a peak of axles on straight lines stands where some axle is on a station.
"""
