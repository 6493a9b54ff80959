"""A token for programs: Authorization: Bearer."""

from django.db import models

from observers.models.person import Person


class ApiToken(models.Model):
    """A program signs in as its owner. Only the SHA-256 of the token is stored."""

    owner = models.ForeignKey(Person, on_delete=models.CASCADE, related_name="api_tokens")
    label = models.CharField(max_length=80)
    token_sha256 = models.CharField(max_length=64, unique=True)
    made_at = models.DateTimeField()
    revoked_at = models.DateTimeField(null=True, blank=True)

    class Meta:
        ordering = ["id"]

    def __str__(self) -> str:
        return self.label
