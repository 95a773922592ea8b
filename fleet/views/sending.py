"""Sending a form: the service's refusal is shown where the form's own would be."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from django.core.exceptions import NON_FIELD_ERRORS, ValidationError
from django.forms import Form


def sent(form: Form, save: Callable[[], object]) -> Any:
    """What `save` made (True if nothing), or None: then the form says why not."""
    if not form.is_valid():
        return None
    try:
        made = save()
    except ValidationError as error:
        for field, errors in error.update_error_dict({}).items():
            known = field in form.fields and field != NON_FIELD_ERRORS
            form.add_error(field if known else None, errors)
        return None
    return True if made is None else made
