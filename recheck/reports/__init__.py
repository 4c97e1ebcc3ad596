"""A finished audit for people and programs to read; nothing here computes a statistic."""
