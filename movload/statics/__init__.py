"""How does a part answer loads? The truss is factored once; every line and every state comes from that one factor.

Takes load columns, never vehicles.
"""
