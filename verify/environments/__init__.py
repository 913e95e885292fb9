"""Which nuclei of a structure are one signal, and how they couple."""
