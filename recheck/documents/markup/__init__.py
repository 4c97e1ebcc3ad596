"""Marked-up articles: JATS XML and HTML, with their tables and MathML."""
