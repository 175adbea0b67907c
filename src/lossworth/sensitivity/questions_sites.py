"""One rating spread over sites with different loading: one purchase for all, or the best bid for each."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from .break_even_lines import leaders
from .lot_model import LotModel

__all__ = ["Site", "SiteCosts", "SiteSpread", "spread_over_sites"]


@dataclass(frozen=True, slots=True)
class Site:
    """Units that are loaded alike.

    Parameters
    ----------
    name : str
        Of the site, or of the kind of sites.
    units : float
        How many of the units stand there, above 0.
    changed : mapping of str to float
        Inputs of the derivation that differ there, by the names of the model's rate inputs.
    """

    name: str
    units: float
    changed: Mapping[str, float]


@dataclass(frozen=True, slots=True)
class SiteCosts:
    """One site.

    Parameters
    ----------
    site : Site
        As given.
    no_load_rate, load_rate, auxiliary_rate : float
        Rates of its loading. [currency/kW]
    cost : tuple of float
        Total owning cost of one unit of each bid there, in the order of the model. [currency]
    leaders : tuple of str
        Who would lead if all units stood there.
    """

    site: Site
    no_load_rate: float
    load_rate: float
    auxiliary_rate: float
    cost: tuple[float, ...]
    leaders: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class SiteSpread:
    """All sites together.

    Parameters
    ----------
    sites : tuple of SiteCosts
        One by one.
    no_load_rate, load_rate, auxiliary_rate : float
        Mean rates by units: with these a single evaluation ranks the bids as the sum over the sites does. [currency/kW]
    total : tuple of float
        Total owning cost over all sites, one a bid. [currency]
    leaders : tuple of str
        Who leads with one bid for all sites.
    one_bid, best_of_each : float
        Cost with one bid for all, and with the best bid for each site. [currency]
    """

    sites: tuple[SiteCosts, ...]
    no_load_rate: float
    load_rate: float
    auxiliary_rate: float
    total: tuple[float, ...]
    leaders: tuple[str, ...]
    one_bid: float
    best_of_each: float

    @property
    def worth_of_splitting(self) -> float:
        """What buying the best bid for each site would save, prices being what they are. [currency]"""
        return self.one_bid - self.best_of_each


def spread_over_sites(model: LotModel, sites: Sequence[Site]) -> SiteSpread:
    """Costs of a lot whose units go to sites with different loading.

    Parameters
    ----------
    model : LotModel
        With derived rates, or those of a study.
    sites : sequence of Site
        At least one.

    Returns
    -------
    SiteSpread
        By site and together.

    Raises
    ------
    KeyError
        If a site changes an input that the derivation does not have.
    ValueError
        If there is no site, or one without units.

    Notes
    -----
    Costs are linear in the rates: the sum over the sites is the cost at the mean rates, weighted by units. The mean of
    the load factors or of the peak loads gives other rates, since losses go with squares.
    """
    if not sites or any(site.units <= 0 for site in sites):
        raise ValueError("sites: at least one is needed, each with units above 0")
    three = [_rates(model, site) for site in sites]
    rates = np.array(three)
    units = np.array([site.units for site in sites])
    costs = model.price[:, np.newaxis] + model.losses @ rates.T
    total = costs @ units
    mean = units @ rates / units.sum()
    return SiteSpread(
        sites=tuple(
            SiteCosts(site, *of_site, tuple(column.tolist()), _names(model, column))
            for site, of_site, column in zip(sites, three, costs.T, strict=True)
        ),
        no_load_rate=float(mean[0]),
        load_rate=float(mean[1]),
        auxiliary_rate=float(mean[2]),
        total=tuple(total.tolist()),
        leaders=_names(model, total),
        one_bid=float(total.min()),
        best_of_each=float(costs.min(axis=0) @ units),
    )


def _rates(model: LotModel, site: Site) -> tuple[float, float, float]:
    a, b, c = model.rates_of(**site.changed)
    return float(a), float(b), float(c)


def _names(model: LotModel, cost: np.ndarray[tuple[int, ...], np.dtype[np.float64]]) -> tuple[str, ...]:
    return tuple(model.bidders[bid] for bid in leaders(cost))
