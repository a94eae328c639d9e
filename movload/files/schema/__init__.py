"""What may a file hold? Bridge and vehicle files key by key; the only place that knows pydantic.

Typed text becomes SI here and nowhere else.
"""
