"""One module a question: records, sentences, traces."""
