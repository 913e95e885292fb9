"""Reading reported peak lists: text to signals, each with its span."""
