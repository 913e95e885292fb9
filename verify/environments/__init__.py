"""Which nuclei give one signal, which may coincide or double, and how they couple."""
