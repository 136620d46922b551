//! Reports: pages of HTML, each put together from its parts.

use enolattice_engine::ReportQuery;

use super::{Client, with_details};
use crate::{ConversionError, RemoteError, v1};

impl Client {
    /// A report of a job or of a plan; see `Engine::report`.
    ///
    /// # Errors
    /// As the embedded engine.
    pub async fn report(&self, query: &ReportQuery) -> Result<String, RemoteError> {
        let request = v1::RenderReportRequest::from(query);
        let answer = self
            .reports
            .clone()
            .render_report(with_details(request))
            .await;
        let mut parts = answer.map_err(|status| self.error(&status))?.into_inner();
        let mut html = Vec::new();
        while let Some(part) = parts
            .message()
            .await
            .map_err(|status| self.error(&status))?
        {
            html.extend(part.html);
        }
        Ok(
            String::from_utf8(html).map_err(|_| ConversionError::Unknown {
                field: "RenderReportResponse.html",
                value: "of bytes that are no UTF-8".to_owned(),
            })?,
        )
    }
}
