//! Plans: made, listed and read, each whole.

use enolattice_engine::{Job, PlanOrder, PlanSummary};
use enolattice_plate::{Plan, PlanRequest};

use super::{Client, places, with_details};
use crate::convert::Assembly;
use crate::{MAX_PAGE_SIZE, RemoteError, v1};

impl Client {
    /// Turns a job into plates and keeps the plan; see `Engine::plan`.
    ///
    /// # Errors
    /// As the embedded engine; faults have the places of the request.
    pub async fn plan(&self, job: String, request: PlanRequest) -> Result<Plan, RemoteError> {
        let faults = request.faults();
        if !faults.is_empty() {
            return Err(RemoteError::Input(faults));
        }
        let request = v1::PlanPlatesRequest {
            job_id: job,
            request: Some((&request).into()),
            validate_only: false,
        };
        let answer = self.plans.clone().plan_plates(with_details(request)).await;
        let head = answer.map_err(|status| match self.error(&status) {
            RemoteError::Input(faults) => RemoteError::Input(places::within("request", faults)),
            other => other,
        })?;
        self.whole(head.into_inner()).await
    }

    /// Queues a job that makes a plan; see `Engine::order_plan`.
    ///
    /// # Errors
    /// As the embedded engine; faults have the places of the request.
    pub async fn order_plan(&self, order: PlanOrder) -> Result<Job, RemoteError> {
        let faults = order.request.faults();
        if !faults.is_empty() {
            return Err(RemoteError::Input(faults));
        }
        let request = v1::OrderPlanRequest {
            job_id: order.job,
            request: Some((&order.request).into()),
            request_id: order.request_id,
            terms: Some((&order.terms).into()),
        };
        let answer = self.plans.clone().order_plan(with_details(request)).await;
        let job = answer.map_err(|status| match self.error(&status) {
            RemoteError::Input(faults) => RemoteError::Input(places::within("request", faults)),
            other => other,
        })?;
        Ok(job.into_inner().try_into()?)
    }

    /// Deletes a kept plan; see `Engine::delete_plan`.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn delete_plan(&self, plan: &str) -> Result<(), RemoteError> {
        let request = v1::DeletePlanRequest {
            plan_id: plan.to_owned(),
        };
        let answer = self.plans.clone().delete_plan(request).await;
        answer.map(drop).map_err(|status| self.error(&status))
    }

    /// A kept plan; see `Engine::kept_plan`.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn kept_plan(&self, plan: &str) -> Result<Plan, RemoteError> {
        let request = v1::GetPlanRequest {
            plan_id: plan.to_owned(),
        };
        let answer = self.plans.clone().get_plan(request).await;
        let head = answer.map_err(|status| self.error(&status))?;
        self.whole(head.into_inner()).await
    }

    /// Kept plans, newest first: those of a job, or all.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn plans(&self, job: Option<&str>) -> Result<Vec<PlanSummary>, RemoteError> {
        let mut plans = Vec::new();
        let mut page_token = String::new();
        loop {
            let request = v1::ListPlansRequest {
                job_id: job.unwrap_or_default().to_owned(),
                page_size: MAX_PAGE_SIZE as i32,
                page_token,
            };
            let answer = self.plans.clone().list_plans(request).await;
            let page = answer.map_err(|status| self.error(&status))?.into_inner();
            for plan in page.plans {
                plans.push(plan.try_into()?);
            }
            page_token = page.next_page_token;
            if page_token.is_empty() {
                return Ok(plans);
            }
        }
    }

    /// The plan of a head, with everything that is streamed.
    async fn whole(&self, head: v1::Plan) -> Result<Plan, RemoteError> {
        let mut assembly = Assembly::new(head)?;
        let plan_id = assembly.id().to_owned();
        let failed = |status| self.error(&status);

        let request = v1::StreamWellsRequest {
            plan_id: plan_id.clone(),
        };
        let answer = self.plans.clone().stream_wells(request).await;
        let mut wells = answer.map_err(failed)?.into_inner();
        while let Some(part) = wells.message().await.map_err(failed)? {
            assembly.add_wells(part)?;
        }

        let request = v1::StreamStocksRequest {
            plan_id: plan_id.clone(),
        };
        let answer = self.plans.clone().stream_stocks(request).await;
        let mut stocks = answer.map_err(failed)?.into_inner();
        while let Some(part) = stocks.message().await.map_err(failed)? {
            assembly.add_stocks(part)?;
        }

        let request = v1::StreamTransfersRequest { plan_id };
        let answer = self.plans.clone().stream_transfers(request).await;
        let mut transfers = answer.map_err(failed)?.into_inner();
        while let Some(part) = transfers.message().await.map_err(failed)? {
            assembly.add_transfers(&part)?;
        }
        Ok(assembly.finish()?)
    }
}
