"""Structure text to a molecule, its components, composition and stereo."""
