"""What does a person see? Tables, documents and drawings of finished results.

Computes nothing: it takes results and returns text, documents or bytes.
"""
