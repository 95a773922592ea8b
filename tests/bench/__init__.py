"""Measurements on the demonstration fleet; never run as tests.

python -m tests.bench [--json] [--data FOLDER]
"""
