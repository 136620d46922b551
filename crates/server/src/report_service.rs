//! Reports.

use std::sync::Arc;

use enolattice_engine::{Engine, ReportQuery};
use enolattice_wire::v1::report_service_server::ReportService;
use enolattice_wire::{PART_BYTES, v1};
use tonic::{Request, Response, Status};

use crate::status::Refusal;

/// The parts of a report, all of them at hand.
type Parts = tokio_stream::Iter<std::vec::IntoIter<Result<v1::RenderReportResponse, Status>>>;

/// The service of reports.
pub(crate) struct Reports {
    engine: Arc<Engine>,
}

impl Reports {
    /// A service in front of an engine.
    pub(crate) fn new(engine: Arc<Engine>) -> Reports {
        Reports { engine }
    }

    async fn render(&self, request: v1::RenderReportRequest) -> Result<String, Refusal> {
        Ok(self.engine.report(ReportQuery::try_from(request)?).await?)
    }
}

#[tonic::async_trait]
impl ReportService for Reports {
    type RenderReportStream = Parts;

    async fn render_report(
        &self,
        request: Request<v1::RenderReportRequest>,
    ) -> Result<Response<Parts>, Status> {
        let (metadata, _, request) = request.into_parts();
        let html = self.render(request).await;
        let html = html.map_err(|refusal| refusal.status(&metadata))?;
        let parts: Vec<_> = html
            .as_bytes()
            .chunks(PART_BYTES)
            .map(|part| {
                Ok(v1::RenderReportResponse {
                    html: part.to_vec(),
                })
            })
            .collect();
        Ok(Response::new(tokio_stream::iter(parts)))
    }
}
