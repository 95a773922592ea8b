"""What every form carries besides its fields."""

from __future__ import annotations

from django import template
from django.template import Context
from django.template.defaulttags import CsrfTokenNode
from django.utils.html import format_html
from django.utils.safestring import SafeString, mark_safe

from fleet.services.sending import KEY_FIELD, SHOWN_FIELD, current

register = template.Library()


@register.simple_tag(takes_context=True)
def csrf_token(context: Context) -> SafeString:
    """Django's token, and with it the form's own key and the history entry its page was
    read at: no form can have the one without the others."""
    token = mark_safe(CsrfTokenNode().render(context))  # Django's own, escaped
    sending = current.get()
    if sending is None:
        return token
    return format_html(
        '{}<input type="hidden" name="{}" value="{}">'
        '<input type="hidden" name="{}" value="{}">',
        token,
        KEY_FIELD,
        sending.key_next(),
        SHOWN_FIELD,
        sending.shown_next(),
    )
