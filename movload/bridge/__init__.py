"""What stands? The truss, its deck and its permanent loads, as measured.

Frozen values in SI, checked when made; nothing here knows how a load is carried.
"""
