"""A link that makes an account."""

from django.db import models

from observers.models.person import Person, Role


class Invitation(models.Model):
    """One use of a link. The token itself is never stored, only its SHA-256."""

    token_sha256 = models.CharField(max_length=64, unique=True)
    role = models.CharField(max_length=12, choices=Role.choices, default=Role.OBSERVER)
    # Set for a reset link: using it gives this person a new password.
    person = models.ForeignKey(
        Person, null=True, blank=True, on_delete=models.CASCADE, related_name="reset_links"
    )
    made_by = models.ForeignKey(
        Person, null=True, blank=True, on_delete=models.SET_NULL, related_name="invitations_made"
    )
    made_at = models.DateTimeField()
    expires_at = models.DateTimeField()
    used_at = models.DateTimeField(null=True, blank=True)

    def __str__(self) -> str:
        return f"invitation {self.pk}"
