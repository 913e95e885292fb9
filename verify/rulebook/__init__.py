"""Facts to findings by declarative rules, policies and accepted deviations."""
