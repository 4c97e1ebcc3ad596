"""PDF: two engines give glyphs, one assembly makes lines, paragraphs and tables of them."""
