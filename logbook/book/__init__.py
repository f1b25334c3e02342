"""The append-only, chained book, drafts and kept figures."""
