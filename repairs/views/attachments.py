"""Serving a kept file to those who may see it."""

from __future__ import annotations

from django.http import FileResponse, Http404, HttpResponseBase
from django.views.decorators.http import require_safe

from fleet.access import visible_or_404
from fleet.kept_files import attachment_path
from fleet.models import Attachment
from fleet.views.requests import Request

LOST = "The file of this attachment is not in the store; restore it from a backup."
SHOWN = ("image/jpeg", "image/png")
ENDING = {"image/jpeg": ".jpg", "image/png": ".png", "application/pdf": ".pdf"}


@require_safe
def attachment(request: Request, pk: int) -> HttpResponseBase:
    """The cleaned copy, never to be read as anything but its own type."""
    row = visible_or_404(Attachment.objects.all(), request.user, pk=pk)
    path = attachment_path(row.sha256)
    if not path.is_file():
        raise Http404(LOST)
    response = FileResponse(
        path.open("rb"),
        content_type=row.media_type,
        as_attachment=row.media_type not in SHOWN,
        filename=f"attachment-{row.pk}{ENDING.get(row.media_type, '')}",
    )
    response["X-Content-Type-Options"] = "nosniff"
    response["Content-Security-Policy"] = "default-src 'none'; sandbox"
    return response
