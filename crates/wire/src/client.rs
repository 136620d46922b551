//! A client of a remote engine, with the types of the embedded one.
//!
//! The methods mirror `enolattice_engine::Engine`: same arguments, same
//! answers, so that a program can print both by the same code.
//!
//! ```no_run
//! # async fn f() -> Result<(), enolattice_wire::RemoteError> {
//! let client = enolattice_wire::Client::connect("http://127.0.0.1:7413").await?;
//! for job in client.jobs().await? {
//!     println!("{} {}", job.job, job.title);
//! }
//! # Ok(())
//! # }
//! ```

use enolattice_engine::{
    Agreement, CellDescription, CellMap, Comparison, Distribution, DryRun, ExplainTarget, Job,
    MapQuery, RankPage, RankQuery, ReagentRow, SiteReport, Submission, Terms,
};
use enolattice_grid::{CampaignSpec, InputError};
use enolattice_model::Explanation;
use prost::Message;
use tonic::metadata::MetadataValue;
use tonic::transport::{Channel, Endpoint};
use tonic::{Request, Status, Streaming};

use crate::convert::measured_request;
use crate::v1::ErrorReason;
use crate::v1::chemistry_service_client::ChemistryServiceClient;
use crate::v1::job_service_client::JobServiceClient;
use crate::v1::plan_service_client::PlanServiceClient;
use crate::v1::report_service_client::ReportServiceClient;
use crate::{
    DETAIL_BYTES_KEY, MAX_ANSWER_BYTES, MAX_DETAIL_BYTES, MAX_MESSAGE_BYTES, MAX_PAGE_SIZE,
    MAX_SITES_MOLECULES, RemoteError, bad_field, v1,
};

mod places;
mod plans;
mod reports;
mod upload;

/// A connection to a remote engine; clones share it.
#[derive(Clone, Debug)]
pub struct Client {
    url: String,
    jobs: JobServiceClient<Channel>,
    chemistry: ChemistryServiceClient<Channel>,
    plans: PlanServiceClient<Channel>,
    reports: ReportServiceClient<Channel>,
}

impl Client {
    /// Connects to a server, e.g. `http://127.0.0.1:7413`; the scheme may be left out.
    ///
    /// # Errors
    /// [`RemoteError::Unreachable`].
    pub async fn connect(url: &str) -> Result<Client, RemoteError> {
        let unreachable = |reason: String| RemoteError::Unreachable {
            url: url.to_owned(),
            reason,
        };
        let address = if url.contains("://") {
            url.to_owned()
        } else {
            format!("http://{url}")
        };
        let endpoint = Endpoint::from_shared(address).map_err(|e| unreachable(told(&e)))?;
        let endpoint = endpoint.http2_max_header_list_size(2 * MAX_DETAIL_BYTES as u32);
        let channel = endpoint
            .connect()
            .await
            .map_err(|e| unreachable(told(&e)))?;
        Ok(Client {
            url: url.to_owned(),
            jobs: JobServiceClient::new(channel.clone())
                .max_decoding_message_size(MAX_ANSWER_BYTES),
            chemistry: ChemistryServiceClient::new(channel.clone())
                .max_decoding_message_size(MAX_ANSWER_BYTES),
            plans: PlanServiceClient::new(channel.clone())
                .max_decoding_message_size(MAX_ANSWER_BYTES),
            reports: ReportServiceClient::new(channel),
        })
    }

    /// Queues a campaign; a large one goes as a stream.
    ///
    /// # Errors
    /// As the embedded engine; faults have the places of `submission.campaign`.
    pub async fn submit(&self, submission: Submission) -> Result<Job, RemoteError> {
        let request = v1::SubmitJobRequest::try_from(&submission).map_err(RemoteError::Input)?;
        Ok(self.send(request, &submission.campaign).await?.try_into()?)
    }

    /// What a campaign would take.
    ///
    /// # Errors
    /// As the embedded engine; faults have the places of the campaign.
    pub async fn dry_run(&self, campaign: CampaignSpec) -> Result<DryRun, RemoteError> {
        let submission = checking(campaign);
        let mut request =
            v1::SubmitJobRequest::try_from(&submission).map_err(RemoteError::Input)?;
        request.dry_run = true;
        Ok(self.send(request, &submission.campaign).await?.try_into()?)
    }

    /// Every fault in the values of a campaign; none where it is sound.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn faults(&self, campaign: CampaignSpec) -> Result<Vec<InputError>, RemoteError> {
        match self.submit(checking(campaign)).await {
            Ok(_) => Ok(Vec::new()),
            Err(RemoteError::Input(faults)) => Ok(faults),
            Err(error) => Err(error),
        }
    }

    async fn send(
        &self,
        request: v1::SubmitJobRequest,
        campaign: &CampaignSpec,
    ) -> Result<v1::Job, RemoteError> {
        let mut jobs = self.jobs.clone();
        let answer = match upload::parts(request) {
            upload::Upload::One(request) => jobs.submit_job(with_details(*request)).await,
            upload::Upload::Stream(parts) => {
                jobs.submit_job_stream(with_details(tokio_stream::iter(parts)))
                    .await
            }
        };
        let job = answer.map_err(|status| match self.error(&status) {
            RemoteError::Input(faults) => RemoteError::Input(places::relocate(faults, campaign)),
            other => other,
        })?;
        Ok(job.into_inner())
    }

    /// All jobs, newest first.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn jobs(&self) -> Result<Vec<Job>, RemoteError> {
        let mut jobs = Vec::new();
        let mut page_token = String::new();
        loop {
            let request = v1::ListJobsRequest {
                page_size: MAX_PAGE_SIZE as i32,
                page_token,
            };
            let answer = self.jobs.clone().list_jobs(request).await;
            let page = answer.map_err(|status| self.error(&status))?.into_inner();
            for job in page.jobs {
                jobs.push(job.try_into()?);
            }
            page_token = page.next_page_token;
            if page_token.is_empty() {
                return Ok(jobs);
            }
        }
    }

    /// One job.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn job(&self, job: &str) -> Result<Job, RemoteError> {
        let request = v1::GetJobRequest {
            job_id: job.to_owned(),
        };
        let answer = self.jobs.clone().get_job(request).await;
        Ok(answer
            .map_err(|status| self.error(&status))?
            .into_inner()
            .try_into()?)
    }

    /// Changes of one job, from now to its end.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn watch(&self, job: &str) -> Result<JobWatch, RemoteError> {
        let request = v1::WatchJobRequest {
            job_id: job.to_owned(),
        };
        let answer = self.jobs.clone().watch_job(request).await;
        let states = answer.map_err(|status| self.error(&status))?.into_inner();
        Ok(JobWatch {
            url: self.url.clone(),
            states,
        })
    }

    /// Cancels a job between two blocks.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn cancel(&self, job: &str) -> Result<Job, RemoteError> {
        let request = v1::CancelJobRequest {
            job_id: job.to_owned(),
        };
        let answer = self.jobs.clone().cancel_job(request).await;
        Ok(answer
            .map_err(|status| self.error(&status))?
            .into_inner()
            .try_into()?)
    }

    /// Holds a job between two blocks.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn pause(&self, job: &str) -> Result<Job, RemoteError> {
        let request = v1::PauseJobRequest {
            job_id: job.to_owned(),
        };
        let answer = self.jobs.clone().pause_job(request).await;
        Ok(answer
            .map_err(|status| self.error(&status))?
            .into_inner()
            .try_into()?)
    }

    /// Lets a paused job wait for its turn again.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn resume(&self, job: &str) -> Result<Job, RemoteError> {
        let request = v1::ResumeJobRequest {
            job_id: job.to_owned(),
        };
        let answer = self.jobs.clone().resume_job(request).await;
        Ok(answer
            .map_err(|status| self.error(&status))?
            .into_inner()
            .try_into()?)
    }

    /// Deletes a job that has ended; see `Engine::delete_job`.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn delete_job(&self, job: &str) -> Result<(), RemoteError> {
        let request = v1::DeleteJobRequest {
            job_id: job.to_owned(),
        };
        let answer = self.jobs.clone().delete_job(request).await;
        answer.map(drop).map_err(|status| self.error(&status))
    }

    /// A page of the ranking, of at most [`MAX_PAGE_SIZE`] rows: go on with the token for more.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn rank(&self, query: RankQuery) -> Result<RankPage, RemoteError> {
        let answer = self
            .jobs
            .clone()
            .rank_cells(v1::RankCellsRequest::from(&query))
            .await;
        Ok(answer
            .map_err(|status| self.error(&status))?
            .into_inner()
            .try_into()?)
    }

    /// The cells of a job over two axes; see `Engine::map_cells`.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn map_cells(&self, query: MapQuery) -> Result<CellMap, RemoteError> {
        let request = v1::MapCellsRequest::from(&query);
        let answer = self.jobs.clone().map_cells(request).await;
        Ok(answer
            .map_err(|status| self.error(&status))?
            .into_inner()
            .try_into()?)
    }

    /// How the scores of a job are distributed; see `Engine::distribution`.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn distribution(&self, job: &str, filter: &str) -> Result<Distribution, RemoteError> {
        let request = v1::GetDistributionRequest {
            job_id: job.to_owned(),
            filter: filter.to_owned(),
        };
        let answer = self.jobs.clone().get_distribution(request).await;
        Ok(answer
            .map_err(|status| self.error(&status))?
            .into_inner()
            .try_into()?)
    }

    /// What a cell is made of and everything about it.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn explain(
        &self,
        target: ExplainTarget,
    ) -> Result<(CellDescription, Explanation), RemoteError> {
        let request = v1::ExplainCellRequest::try_from(&target).map_err(RemoteError::Input)?;
        let answer = self
            .chemistry
            .clone()
            .explain_cell(with_details(request))
            .await;
        let answer = answer.map_err(|status| match self.error(&status) {
            RemoteError::Input(faults) => RemoteError::Input(places::within("given_cell", faults)),
            other => other,
        })?;
        Ok(answer.into_inner().try_into()?)
    }

    /// Two jobs compared; see `Engine::compare`.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn compare(
        &self,
        before: &str,
        after: &str,
        movers: u32,
    ) -> Result<Comparison, RemoteError> {
        let request = v1::CompareJobsRequest {
            before_job_id: before.to_owned(),
            after_job_id: after.to_owned(),
            movers: Some(movers.min(i32::MAX as u32) as i32),
        };
        let answer = self.jobs.clone().compare_jobs(request).await;
        Ok(answer
            .map_err(|status| self.error(&status))?
            .into_inner()
            .try_into()?)
    }

    /// What was measured, held against the model; see `Engine::check_measured`.
    ///
    /// # Errors
    /// As the embedded engine, and where the specification is more than one message holds.
    pub async fn check_measured(
        &self,
        spec: CampaignSpec,
        misses: u32,
    ) -> Result<Agreement, RemoteError> {
        let request = measured_request(&spec, misses).map_err(RemoteError::Input)?;
        if request.encoded_len() > MAX_MESSAGE_BYTES {
            return Err(RemoteError::Input(vec![bad_field(
                ErrorReason::CampaignTooLarge,
                "campaign",
                "",
                format!(
                    "what was measured and its campaign take more than {MAX_MESSAGE_BYTES} bytes"
                ),
                "ask in several parts, or with a campaign of the substrates that were run",
            )]));
        }
        let answer = self
            .chemistry
            .clone()
            .check_measured(with_details(request))
            .await;
        let answer = answer.map_err(|status| match self.error(&status) {
            RemoteError::Input(faults) => RemoteError::Input(places::relocate(faults, &spec)),
            other => other,
        })?;
        Ok(answer.into_inner().try_into()?)
    }

    /// Acidic sites of molecules.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn sites(&self, smiles: &[String]) -> Result<Vec<SiteReport>, RemoteError> {
        let mut reports = Vec::new();
        for chunk in smiles.chunks(MAX_SITES_MOLECULES) {
            let request = v1::ListSitesRequest {
                smiles: chunk.to_vec(),
            };
            let answer = self
                .chemistry
                .clone()
                .list_sites(with_details(request))
                .await;
            for molecule in answer
                .map_err(|status| self.error(&status))?
                .into_inner()
                .molecules
            {
                reports.push(molecule.try_into()?);
            }
        }
        Ok(reports)
    }

    /// The library; `word` narrows it, empty gives all.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn reagents(&self, word: &str) -> Result<Vec<ReagentRow>, RemoteError> {
        let mut rows = Vec::new();
        let mut page_token = String::new();
        loop {
            let request = v1::ListReagentsRequest {
                word: word.to_owned(),
                page_size: MAX_PAGE_SIZE as i32,
                page_token,
            };
            let answer = self.chemistry.clone().list_reagents(request).await;
            let page = answer.map_err(|status| self.error(&status))?.into_inner();
            for reagent in page.reagents {
                rows.push(reagent.try_into()?);
            }
            page_token = page.next_page_token;
            if page_token.is_empty() {
                return Ok(rows);
            }
        }
    }

    fn error(&self, status: &Status) -> RemoteError {
        RemoteError::from_status(status, &self.url)
    }
}

/// The changes of a watched job.
#[derive(Debug)]
pub struct JobWatch {
    url: String,
    states: Streaming<v1::WatchJobResponse>,
}

impl JobWatch {
    /// The next state: the present one at first; `None` after the final one.
    ///
    /// # Errors
    /// The server stopped or cannot be reached any more.
    pub async fn next(&mut self) -> Result<Option<Job>, RemoteError> {
        let message = self.states.message().await;
        let message = message.map_err(|status| RemoteError::from_status(&status, &self.url))?;
        match message {
            Some(v1::WatchJobResponse { job }) => Ok(Some(job.unwrap_or_default().try_into()?)),
            None => Ok(None),
        }
    }
}

/// A submission that is checked only.
fn checking(campaign: CampaignSpec) -> Submission {
    Submission {
        campaign,
        request_id: String::new(),
        validate_only: true,
        terms: Terms::default(),
    }
}

/// A request that asks for all faults of its input, however many.
fn with_details<T>(message: T) -> Request<T> {
    let mut request = Request::new(message);
    request
        .metadata_mut()
        .insert(DETAIL_BYTES_KEY, MetadataValue::from(MAX_DETAIL_BYTES));
    request
}

/// An error with its causes, which say more than itself.
fn told(error: &dyn std::error::Error) -> String {
    let mut text = error.to_string();
    let mut cause = error.source();
    while let Some(error) = cause {
        text = format!("{text}: {error}");
        cause = error.source();
    }
    text
}
