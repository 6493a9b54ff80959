"""Addresses of the pages."""

from django.urls import path

from campaigns.pages import views

urlpatterns = [
    path("", views.home, name="home"),
    path("sign-in/", views.sign_in, name="sign-in"),
    path("join/<str:token>/", views.join, name="join"),
    path("launch/", views.launch, name="launch"),
    path("gear/", views.gear, name="gear"),
    path("methods/", views.methods, name="methods"),
    path("c/<str:campaign_id>/", views.board, name="board"),
    path("c/<str:campaign_id>/tonight/", views.tonight, name="tonight"),
    path("c/<str:campaign_id>/log/", views.log, name="log"),
]
