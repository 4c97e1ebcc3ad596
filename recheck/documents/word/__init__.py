"""Word documents (DOCX, ISO/IEC 29500): package, styles, text, equations and tables."""
