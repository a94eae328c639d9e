"""``python -m movload`` does what the ``movload`` command does."""

from movload.cli.main import run

if __name__ == "__main__":
    run()
