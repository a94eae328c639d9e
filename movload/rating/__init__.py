"""Is it enough? The rating factor: by how much the live load could grow before strength is used up.

RF = (R - D) / (L (1 + I)), tension and compression apart, for every row, crossing and level.
"""
