"""``python -m verify`` is the command ``peakwitness``."""

from verify.cli.main import main

if __name__ == "__main__":  # worker processes import this module again under another name
    raise SystemExit(main())
