//! Explanations, sites and the library.

use std::sync::Arc;

use enolattice_engine::{Engine, ExplainTarget};
use enolattice_wire::v1::chemistry_service_server::ChemistryService;
use enolattice_wire::v1::{self, ErrorReason};
use enolattice_wire::{MAX_SITES_MOLECULES, bad_field, explained, measured};
use tonic::{Request, Response, Status};

use crate::paging;
use crate::status::Refusal;

/// The service of chemistry that needs no job.
pub(crate) struct Chemistry {
    engine: Arc<Engine>,
}

impl Chemistry {
    /// A service in front of an engine.
    pub(crate) fn new(engine: Arc<Engine>) -> Chemistry {
        Chemistry { engine }
    }

    async fn explain(
        &self,
        request: v1::ExplainCellRequest,
    ) -> Result<v1::ExplainCellResponse, Refusal> {
        let target = ExplainTarget::try_from(request)?;
        let within = |error| Refusal::within("given_cell", error);
        let cell = self.engine.describe(target.clone()).await.map_err(within)?;
        let explanation = self.engine.explain(target).await.map_err(within)?;
        Ok(explained(&cell, &explanation))
    }

    async fn sites(&self, smiles: &[String]) -> Result<v1::ListSitesResponse, Refusal> {
        if smiles.is_empty() || smiles.len() > MAX_SITES_MOLECULES {
            return Err(Refusal::from(vec![bad_field(
                ErrorReason::ValueOutOfRange,
                "smiles",
                format!("{} molecules", smiles.len()),
                format!("1 to {MAX_SITES_MOLECULES} molecules are taken"),
                "ask in several requests",
            )]));
        }
        let reports = self.engine.sites(smiles).await?;
        Ok(v1::ListSitesResponse {
            molecules: reports.iter().map(Into::into).collect(),
        })
    }

    async fn check_measured(
        &self,
        request: v1::CheckMeasuredRequest,
    ) -> Result<v1::CheckMeasuredResponse, Refusal> {
        let within = |error| Refusal::within("campaign", error);
        let (campaign, misses, faults) = measured(request);
        if !faults.is_empty() {
            let found = self.engine.faults_measured(campaign).await;
            return Err(Refusal::together(faults, found.map_err(within)?));
        }
        let agreement = self.engine.check_measured(campaign, misses).await;
        Ok((&agreement.map_err(within)?).into())
    }

    async fn reagents(
        &self,
        request: v1::ListReagentsRequest,
    ) -> Result<v1::ListReagentsResponse, Refusal> {
        let rows = self.engine.reagents(&request.word).await?;
        let asked = paging::Asked {
            list: "reagents",
            arguments: &request.word,
            page_size: request.page_size,
            page_token: &request.page_token,
        };
        let page = asked.page(&rows, |row| format!("{} {}", row.kind, row.name))?;
        Ok(v1::ListReagentsResponse {
            reagents: page.rows.iter().map(Into::into).collect(),
            next_page_token: page.next_page_token,
        })
    }
}

#[tonic::async_trait]
impl ChemistryService for Chemistry {
    async fn explain_cell(
        &self,
        request: Request<v1::ExplainCellRequest>,
    ) -> Result<Response<v1::ExplainCellResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = self.explain(request).await;
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }

    async fn list_sites(
        &self,
        request: Request<v1::ListSitesRequest>,
    ) -> Result<Response<v1::ListSitesResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = self.sites(&request.smiles).await;
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }

    async fn list_reagents(
        &self,
        request: Request<v1::ListReagentsRequest>,
    ) -> Result<Response<v1::ListReagentsResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = self.reagents(request).await;
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }

    async fn check_measured(
        &self,
        request: Request<v1::CheckMeasuredRequest>,
    ) -> Result<Response<v1::CheckMeasuredResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = self.check_measured(request).await;
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }
}
