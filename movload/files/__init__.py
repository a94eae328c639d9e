"""How is it written down? TOML files to bridges and vehicles, shipped names to files, results to disk.

The only folder that opens files; ``schema`` and ``documents`` are the only modules that know pydantic.
"""
