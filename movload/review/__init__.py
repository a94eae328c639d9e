"""Would another engineer get the same? The terms of a sum, so that anyone can add it again."""
