//! Plans.

use std::sync::Arc;

use enolattice_engine::{Engine, EngineError, PlanOrder};
use enolattice_plate::Plan;
use enolattice_wire::v1::plan_service_server::PlanService;
use enolattice_wire::{plan_request, stock_parts, terms, transfer_parts, v1, well_parts};
use tonic::metadata::MetadataMap;
use tonic::{Request, Response, Status};

use crate::paging;
use crate::status::Refusal;

/// The parts of a plan, all of them at hand.
type Parts<T> = tokio_stream::Iter<std::vec::IntoIter<Result<T, Status>>>;

/// The service of plans.
pub(crate) struct Plans {
    engine: Arc<Engine>,
}

impl Plans {
    /// A service in front of an engine.
    pub(crate) fn new(engine: Arc<Engine>) -> Plans {
        Plans { engine }
    }

    async fn plan(&self, request: v1::PlanPlatesRequest) -> Result<v1::Plan, Refusal> {
        let within = |error| Refusal::within("request", error);
        let asked = plan_request(request.request)?;
        let plan = match request.validate_only {
            true => self.engine.draft_plan(request.job_id, asked).await,
            false => self.engine.plan(request.job_id, asked).await,
        };
        Ok((&plan.map_err(within)?).into())
    }

    async fn order(&self, request: v1::OrderPlanRequest) -> Result<v1::Job, Refusal> {
        let within = |error| Refusal::within("request", error);
        let (terms, faults) = terms(request.terms);
        let asked = match plan_request(request.request) {
            Ok(asked) if faults.is_empty() => asked,
            Ok(_) => return Err(Refusal::from(faults)),
            Err(more) => return Err(Refusal::from([faults, more].concat())),
        };
        let order = PlanOrder {
            job: request.job_id,
            request: asked,
            request_id: request.request_id,
            terms,
        };
        let job = self.engine.order_plan(order).await.map_err(within)?;
        Ok((&job).into())
    }

    async fn list(&self, request: v1::ListPlansRequest) -> Result<v1::ListPlansResponse, Refusal> {
        let job = Some(request.job_id.as_str()).filter(|job| !job.is_empty());
        let plans = self.engine.plans(job).await?;
        let asked = paging::Asked {
            list: "plans",
            arguments: &request.job_id,
            page_size: request.page_size,
            page_token: &request.page_token,
        };
        let page = asked.page(&plans, |plan| plan.plan.clone())?;
        Ok(v1::ListPlansResponse {
            plans: page.rows.iter().map(Into::into).collect(),
            next_page_token: page.next_page_token,
        })
    }

    /// The parts of a kept plan, made on a blocking thread.
    async fn parts<T: Send + 'static>(
        &self,
        metadata: &MetadataMap,
        plan: &str,
        parts: impl FnOnce(&Plan) -> Vec<T> + Send + 'static,
    ) -> Result<Response<Parts<T>>, Status> {
        let made = async {
            let plan = self.engine.kept_plan(plan).await?;
            let parts = tokio::task::spawn_blocking(move || parts(&plan)).await;
            parts.map_err(|_| EngineError::Stopping)
        };
        let made = made
            .await
            .map_err(|error| Refusal::from(error).status(metadata))?;
        let parts: Vec<_> = made.into_iter().map(Ok).collect();
        Ok(Response::new(tokio_stream::iter(parts)))
    }
}

#[tonic::async_trait]
impl PlanService for Plans {
    type StreamWellsStream = Parts<v1::StreamWellsResponse>;
    type StreamStocksStream = Parts<v1::StreamStocksResponse>;
    type StreamTransfersStream = Parts<v1::StreamTransfersResponse>;

    async fn plan_plates(
        &self,
        request: Request<v1::PlanPlatesRequest>,
    ) -> Result<Response<v1::Plan>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = self.plan(request).await;
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }

    async fn order_plan(
        &self,
        request: Request<v1::OrderPlanRequest>,
    ) -> Result<Response<v1::Job>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = self.order(request).await;
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }

    async fn delete_plan(
        &self,
        request: Request<v1::DeletePlanRequest>,
    ) -> Result<Response<v1::DeletePlanResponse>, Status> {
        let (metadata, _, v1::DeletePlanRequest { plan_id }) = request.into_parts();
        let gone = self.engine.delete_plan(&plan_id).await;
        gone.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new(v1::DeletePlanResponse {}))
    }

    async fn get_plan(
        &self,
        request: Request<v1::GetPlanRequest>,
    ) -> Result<Response<v1::Plan>, Status> {
        let (metadata, _, v1::GetPlanRequest { plan_id }) = request.into_parts();
        let plan = self.engine.kept_plan(&plan_id).await;
        let plan = plan.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new((&plan).into()))
    }

    async fn list_plans(
        &self,
        request: Request<v1::ListPlansRequest>,
    ) -> Result<Response<v1::ListPlansResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = self.list(request).await;
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }

    async fn stream_wells(
        &self,
        request: Request<v1::StreamWellsRequest>,
    ) -> Result<Response<Self::StreamWellsStream>, Status> {
        let (metadata, _, v1::StreamWellsRequest { plan_id }) = request.into_parts();
        self.parts(&metadata, &plan_id, well_parts).await
    }

    async fn stream_stocks(
        &self,
        request: Request<v1::StreamStocksRequest>,
    ) -> Result<Response<Self::StreamStocksStream>, Status> {
        let (metadata, _, v1::StreamStocksRequest { plan_id }) = request.into_parts();
        self.parts(&metadata, &plan_id, stock_parts).await
    }

    async fn stream_transfers(
        &self,
        request: Request<v1::StreamTransfersRequest>,
    ) -> Result<Response<Self::StreamTransfersStream>, Status> {
        let (metadata, _, v1::StreamTransfersRequest { plan_id }) = request.into_parts();
        self.parts(&metadata, &plan_id, transfer_parts).await
    }
}
