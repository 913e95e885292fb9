"""The stages of one record, in order, and the rules over many records."""
