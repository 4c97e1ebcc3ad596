"""Tables on PDF pages: found by captions, rules or aligned columns, put into rows and columns."""
