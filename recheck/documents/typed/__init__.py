"""Plain text and Markdown, with the tables that are typed in them."""
