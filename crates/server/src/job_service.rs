//! Jobs and their rankings.

use std::sync::Arc;

use enolattice_engine::{Engine, MapQuery, RankQuery};
use enolattice_wire::v1::job_service_server::JobService;
use enolattice_wire::{movers, submission, v1};
use tokio::sync::watch;
use tokio_stream::wrappers::ReceiverStream;
use tonic::{Request, Response, Status, Streaming};

use crate::status::Refusal;
use crate::{paging, upload};

/// The service of jobs.
pub(crate) struct Jobs {
    engine: Arc<Engine>,
    stopping: watch::Receiver<bool>,
}

impl Jobs {
    /// A service that ends its streams when `stopping` becomes true.
    pub(crate) fn new(engine: Arc<Engine>, stopping: watch::Receiver<bool>) -> Jobs {
        Jobs { engine, stopping }
    }

    async fn submit(&self, request: v1::SubmitJobRequest) -> Result<v1::Job, Refusal> {
        let within = |error| Refusal::within("campaign", error);
        let dry_run = request.dry_run;
        let (submission, faults) = submission(request);
        if !faults.is_empty() {
            let found = self.engine.faults(submission.campaign).await;
            return Err(Refusal::together(faults, found.map_err(within)?));
        }
        if dry_run {
            let run = self.engine.dry_run(submission.campaign).await;
            return Ok(v1::Job::from(&run.map_err(within)?));
        }
        let job = self.engine.submit(submission).await;
        Ok(v1::Job::from(&job.map_err(within)?))
    }
}

#[tonic::async_trait]
impl JobService for Jobs {
    type WatchJobStream = ReceiverStream<Result<v1::WatchJobResponse, Status>>;

    async fn submit_job(
        &self,
        request: Request<v1::SubmitJobRequest>,
    ) -> Result<Response<v1::Job>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = self.submit(request).await;
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }

    async fn submit_job_stream(
        &self,
        request: Request<Streaming<v1::SubmitJobStreamRequest>>,
    ) -> Result<Response<v1::Job>, Status> {
        let (metadata, _, parts) = request.into_parts();
        let answer = match upload::collect(parts).await? {
            Ok(request) => self.submit(request).await,
            Err(refusal) => Err(refusal),
        };
        answer
            .map(Response::new)
            .map_err(|refusal| refusal.status(&metadata))
    }

    async fn get_job(
        &self,
        request: Request<v1::GetJobRequest>,
    ) -> Result<Response<v1::Job>, Status> {
        let (metadata, _, v1::GetJobRequest { job_id }) = request.into_parts();
        let job = self.engine.job(&job_id).await;
        let job = job.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new(v1::Job::from(&job)))
    }

    async fn list_jobs(
        &self,
        request: Request<v1::ListJobsRequest>,
    ) -> Result<Response<v1::ListJobsResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = async {
            let jobs = self.engine.jobs().await?;
            let asked = paging::Asked {
                list: "jobs",
                arguments: "",
                page_size: request.page_size,
                page_token: &request.page_token,
            };
            let page = asked.page(&jobs, |job| job.job.clone())?;
            Ok(v1::ListJobsResponse {
                jobs: page.rows.iter().map(Into::into).collect(),
                next_page_token: page.next_page_token,
            })
        };
        answer
            .await
            .map(Response::new)
            .map_err(|refusal: Refusal| refusal.status(&metadata))
    }

    async fn cancel_job(
        &self,
        request: Request<v1::CancelJobRequest>,
    ) -> Result<Response<v1::Job>, Status> {
        let (metadata, _, v1::CancelJobRequest { job_id }) = request.into_parts();
        let job = self.engine.cancel(&job_id).await;
        let job = job.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new(v1::Job::from(&job)))
    }

    async fn pause_job(
        &self,
        request: Request<v1::PauseJobRequest>,
    ) -> Result<Response<v1::Job>, Status> {
        let (metadata, _, v1::PauseJobRequest { job_id }) = request.into_parts();
        let job = self.engine.pause(&job_id).await;
        let job = job.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new(v1::Job::from(&job)))
    }

    async fn resume_job(
        &self,
        request: Request<v1::ResumeJobRequest>,
    ) -> Result<Response<v1::Job>, Status> {
        let (metadata, _, v1::ResumeJobRequest { job_id }) = request.into_parts();
        let job = self.engine.resume(&job_id).await;
        let job = job.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new(v1::Job::from(&job)))
    }

    async fn delete_job(
        &self,
        request: Request<v1::DeleteJobRequest>,
    ) -> Result<Response<v1::DeleteJobResponse>, Status> {
        let (metadata, _, v1::DeleteJobRequest { job_id }) = request.into_parts();
        let gone = self.engine.delete_job(&job_id).await;
        gone.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new(v1::DeleteJobResponse {}))
    }

    async fn watch_job(
        &self,
        request: Request<v1::WatchJobRequest>,
    ) -> Result<Response<Self::WatchJobStream>, Status> {
        let (metadata, _, v1::WatchJobRequest { job_id }) = request.into_parts();
        let states = self.engine.watch(&job_id).await;
        let states = states.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new(crate::watch::changes(
            states,
            self.stopping.clone(),
        )))
    }

    async fn rank_cells(
        &self,
        request: Request<v1::RankCellsRequest>,
    ) -> Result<Response<v1::RankCellsResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = async {
            let page = self.engine.rank(RankQuery::try_from(request)?).await?;
            Ok(v1::RankCellsResponse::from(&page))
        };
        answer
            .await
            .map(Response::new)
            .map_err(|refusal: Refusal| refusal.status(&metadata))
    }

    async fn map_cells(
        &self,
        request: Request<v1::MapCellsRequest>,
    ) -> Result<Response<v1::MapCellsResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = async {
            let map = self.engine.map_cells(MapQuery::try_from(request)?).await?;
            Ok(v1::MapCellsResponse::from(&map))
        };
        answer
            .await
            .map(Response::new)
            .map_err(|refusal: Refusal| refusal.status(&metadata))
    }

    async fn get_distribution(
        &self,
        request: Request<v1::GetDistributionRequest>,
    ) -> Result<Response<v1::GetDistributionResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let v1::GetDistributionRequest { job_id, filter } = request;
        let answer = self.engine.distribution(job_id, filter).await;
        let known = answer.map_err(|error| Refusal::from(error).status(&metadata))?;
        Ok(Response::new(v1::GetDistributionResponse::from(&known)))
    }

    async fn compare_jobs(
        &self,
        request: Request<v1::CompareJobsRequest>,
    ) -> Result<Response<v1::CompareJobsResponse>, Status> {
        let (metadata, _, request) = request.into_parts();
        let answer = async {
            let movers = movers(&request)?;
            let (before, after) = (&request.before_job_id, &request.after_job_id);
            let compared = self.engine.compare(before, after, movers).await?;
            Ok(v1::CompareJobsResponse::from(&compared))
        };
        answer
            .await
            .map(Response::new)
            .map_err(|refusal: Refusal| refusal.status(&metadata))
    }
}
