"""The URL table of the API, below /api/v1/; accounts have their own (account_urls)."""

from django.urls import path

from campaigns.api import campaigns, depth, gear, observing, regions, revisions, sources, watching

urlpatterns = [
    path("sites", gear.SitesView.as_view(), name="api-sites"),
    path("sites/<int:site_id>", gear.SiteView.as_view(), name="api-site"),
    path("instruments", gear.InstrumentsView.as_view(), name="api-instruments"),
    path("instruments/<int:instrument_id>", gear.InstrumentView.as_view(), name="api-instrument"),
    path(
        "instruments/<int:instrument_id>/depth-estimate",
        depth.DepthEstimateView.as_view(),
        name="api-depth-estimate",
    ),
    path("source-models", sources.SourceModelsView.as_view(), name="api-source-models"),
    path(
        "campaigns/<str:campaign_id>/source",
        sources.CampaignSourceView.as_view(),
        name="api-campaign-source",
    ),
    path("region", regions.RegionView.as_view(), name="api-region"),
    path("campaigns", campaigns.CampaignsView.as_view(), name="api-campaigns"),
    path("campaigns/<str:campaign_id>", campaigns.CampaignView.as_view(), name="api-campaign"),
    path("campaigns/<str:campaign_id>/open", campaigns.OpenView.as_view(), name="api-open"),
    path("campaigns/<str:campaign_id>/close", campaigns.CloseView.as_view(), name="api-close"),
    path("campaigns/<str:campaign_id>/plan", campaigns.PlanView.as_view(), name="api-plan"),
    path("campaigns/<str:campaign_id>/status", campaigns.StatusView.as_view(), name="api-status"),
    path("campaigns/<str:campaign_id>/clock", campaigns.ClockView.as_view(), name="api-clock"),
    path("campaigns/<str:campaign_id>/events", watching.EventsView.as_view(), name="api-events"),
    path(
        "campaigns/<str:campaign_id>/region",
        revisions.CampaignRegionView.as_view(),
        name="api-region-arrays",
    ),
    path(
        "campaigns/<str:campaign_id>/region/revisions",
        revisions.RevisionsView.as_view(),
        name="api-region-revisions",
    ),
    path(
        "campaigns/<str:campaign_id>/coverage",
        watching.CoverageView.as_view(),
        name="api-coverage",
    ),
    path(
        "campaigns/<str:campaign_id>/darkness",
        watching.DarknessView.as_view(),
        name="api-darkness",
    ),
    path(
        "campaigns/<str:campaign_id>/best-tile",
        observing.BestTileView.as_view(),
        name="api-best-tile",
    ),
    path(
        "campaigns/<str:campaign_id>/tonight", observing.TonightView.as_view(), name="api-tonight"
    ),
    path("campaigns/<str:campaign_id>/claims", observing.ClaimsView.as_view(), name="api-claims"),
    path(
        "campaigns/<str:campaign_id>/claims/<int:claim_id>/release",
        observing.ReleaseView.as_view(),
        name="api-release",
    ),
    path(
        "campaigns/<str:campaign_id>/claims/<int:claim_id>/extend",
        observing.ExtendView.as_view(),
        name="api-extend",
    ),
    path("campaigns/<str:campaign_id>/frames", observing.FramesView.as_view(), name="api-frames"),
    path(
        "campaigns/<str:campaign_id>/frames/<int:number>/examine",
        observing.ExamineView.as_view(),
        name="api-examine",
    ),
    path(
        "campaigns/<str:campaign_id>/frames/<int:number>/withdraw",
        observing.WithdrawView.as_view(),
        name="api-withdraw",
    ),
    path(
        "campaigns/<str:campaign_id>/frames/<int:number>/correct",
        observing.CorrectView.as_view(),
        name="api-correct",
    ),
]
